/**
 * A figure as plain shapes, in pixels from its top left corner. `look` names what a shape is (`grid`, `curve s0`):
 * the page's style sheet, or the one that is written into a file, gives it its colour.
 */
export interface Figure {
  readonly width: number
  readonly height: number
  /** The figure in words. */
  readonly label: string
  readonly shapes: readonly Shape[]
}

export type Shape =
  | {
      readonly kind: 'line'
      readonly x1: number
      readonly y1: number
      readonly x2: number
      readonly y2: number
      readonly look: string
    }
  | { readonly kind: 'path'; readonly d: string; readonly look: string }
  | ({ readonly kind: 'rect'; readonly round: number; readonly look: string; readonly title?: string } & Box)
  | {
      readonly kind: 'text'
      readonly x: number
      readonly y: number
      readonly anchor: 'start' | 'middle' | 'end'
      readonly text: string
      readonly look: string
    }
  | { readonly kind: 'clipped'; readonly box: Box; readonly shapes: readonly Shape[] }

export interface Box {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
}

/** An SVG element: name, attributes, and either text or children. What draws a figure walks these and adds nothing. */
export interface SvgElement {
  readonly name: string
  readonly attributes: Readonly<Record<string, string>>
  readonly text?: string
  readonly children: readonly SvgElement[]
}

/** A shape as SVG. */
export function svgElement(shape: Shape): SvgElement {
  switch (shape.kind) {
    case 'line':
      return element('line', numbers({ x1: shape.x1, y1: shape.y1, x2: shape.x2, y2: shape.y2 }, shape.look))
    case 'path':
      return element('path', { class: shape.look, d: shape.d })
    case 'rect': {
      const { x, y, width, height } = shape
      const title = shape.title === undefined ? [] : [{ ...element('title', {}), text: shape.title }]
      return element('rect', numbers({ x, y, width, height, rx: shape.round }, shape.look), title)
    }
    case 'text':
      return {
        ...element('text', { ...numbers({ x: shape.x, y: shape.y }, shape.look), 'text-anchor': shape.anchor }),
        text: shape.text
      }
    case 'clipped': {
      // An inner image with its own view cuts what leaves it, and needs no id that two figures on a page could share.
      const { x, y, width, height } = shape.box
      const viewBox = `${pixel(x)} ${pixel(y)} ${pixel(width)} ${pixel(height)}`
      return element('svg', { ...numbers({ x, y, width, height }), viewBox }, shape.shapes.map(svgElement))
    }
  }
}

/** A tenth of a pixel is finer than any screen or printer here shows. */
export function pixel(x: number): number {
  return Math.round(x * 10) / 10
}

function element(
  name: string,
  attributes: Readonly<Record<string, string>>,
  children: readonly SvgElement[] = []
): SvgElement {
  return { name, attributes, children }
}

function numbers(values: Readonly<Record<string, number>>, look?: string): Record<string, string> {
  const attributes: Record<string, string> = look === undefined ? {} : { class: look }
  for (const [name, value] of Object.entries(values)) attributes[name] = String(pixel(value))
  return attributes
}
