import { type Accessor, createSignal, onCleanup, onMount } from 'solid-js'

/** Type of figures is drawn for this size of the page's type [px]; where that is larger, so is the figure. */
const USUAL_TYPE = 16

/**
 * The width to draw a figure for, in the figure's own pixels, followed as its element changes; `initial` until it is on
 * the page. Where the page's type is larger than usual a figure is drawn for less and shown larger.
 */
export function createFigureWidth(element: () => Element, initial: number): Accessor<number> {
  const [width, setWidth] = createSignal(initial)
  onMount(() => {
    const measure = () => {
      const type = Number.parseFloat(getComputedStyle(document.documentElement).fontSize)
      const found = Math.round(element().getBoundingClientRect().width / Math.max(1, type / USUAL_TYPE))
      if (found > 0) setWidth(found)
    }
    const observer = new ResizeObserver(measure)
    observer.observe(element())
    measure()
    onCleanup(() => observer.disconnect())
  })
  return width
}
