import { createMemo } from 'solid-js'
import type { Figure } from '../report/figure'
import { FigureView } from './FigureView'
import { createFigureWidth } from './figureWidth'

/** A figure drawn for the width that it has, `expected` until that is known. */
export function SizedFigure(props: { draw: (width: number) => Figure; expected: number }) {
  let frame!: HTMLDivElement
  const width = createFigureWidth(() => frame, props.expected)
  const figure = createMemo(() => props.draw(width()))
  return (
    <div ref={frame}>
      <FigureView figure={figure()} />
    </div>
  )
}
