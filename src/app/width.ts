import { type Accessor, createSignal, onCleanup, onMount } from 'solid-js'

/** The width of an element in whole pixels, followed as it changes; `initial` until it is on the page. */
export function createWidth(element: () => Element, initial: number): Accessor<number> {
  const [width, setWidth] = createSignal(initial)
  onMount(() => {
    const measure = () => {
      const found = Math.round(element().getBoundingClientRect().width)
      if (found > 0) setWidth(found)
    }
    const observer = new ResizeObserver(measure)
    observer.observe(element())
    measure()
    onCleanup(() => observer.disconnect())
  })
  return width
}
