import { createEffect } from 'solid-js'
import { type Figure, type SvgElement, svgElement } from '../report/figure'

const SVG = 'http://www.w3.org/2000/svg'

/** A figure on the screen: an image in words for a screen reader, shapes for the eye. */
export function FigureView(props: { figure: Figure }) {
  let root!: SVGSVGElement
  createEffect(() => {
    const { width, height, shapes } = props.figure
    root.setAttribute('viewBox', `0 0 ${width} ${height}`)
    root.replaceChildren(...shapes.map((shape) => drawn(svgElement(shape))))
  })
  return <svg ref={root} class="figure" role="img" aria-label={props.figure.label} />
}

/** Elements and text nodes, never markup: what a file calls a regimen stays text. */
function drawn(element: SvgElement): Element {
  const node = document.createElementNS(SVG, element.name)
  for (const [name, value] of Object.entries(element.attributes)) node.setAttribute(name, value)
  if (element.text !== undefined) node.textContent = element.text
  for (const child of element.children) node.append(drawn(child))
  return node
}
