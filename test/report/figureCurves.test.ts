import { expect, test } from 'vitest'
import { type Shape, svgElement } from '../../src/report/figure'
import { curvesFigure } from '../../src/report/figureCurves'
import type { ChartView, DoseMark, SiteView } from '../../src/report/page/chart'

const label = (k: number) => ({ letter: 'ABCDEF'.charAt(k), name: `regimen ${k}`, style: k })

function site(curves: readonly (readonly (readonly [number, number])[])[]): SiteView {
  return {
    name: 'plasma',
    title: 'Concentration, mg/L',
    curves: curves.map((points, k) => ({
      regimen: label(k),
      times: Float64Array.from(points, ([time]) => time),
      values: Float64Array.from(points, ([, value]) => value)
    })),
    window: { low: 10, high: 40, label: 'window 10 to 40 mg/L' },
    label: 'in words'
  }
}

function chart(shown: SiteView, doses: readonly DoseMark[] = []): ChartView {
  return {
    timeUnit: 'h',
    hoursPerUnit: 1,
    until: 100,
    sites: [shown],
    firstSite: 0,
    changes: [],
    sessions: [],
    lanes: shown.curves.map(({ regimen }) => ({ regimen, doses }))
  }
}

function all(shapes: readonly Shape[]): Shape[] {
  return shapes.flatMap((shape) => (shape.kind === 'clipped' ? [shape, ...all(shape.shapes)] : [shape]))
}

function paths(shapes: readonly Shape[]): string[] {
  return all(shapes).flatMap((shape) => (shape.kind === 'path' && shape.look.startsWith('curve') ? [shape.d] : []))
}

test('a log axis breaks a curve where it is 0, and draws no line to the floor', () => {
  const shown = site([
    [
      [0, 0],
      [10, 0],
      [20, 30],
      [40, 5],
      [50, 0],
      [60, 20],
      [100, 8]
    ]
  ])
  const [path = ''] = paths(curvesFigure(chart(shown), shown, { width: 800, axis: 'log' }).shapes)
  expect(path.match(/M/g)).toHaveLength(2)
  expect(path.match(/[ML]/g)).toHaveLength(4)
  expect(path).not.toMatch(/NaN|Infinity/)
  const [linear = ''] = paths(curvesFigure(chart(shown), shown, { width: 800, axis: 'linear' }).shapes)
  expect(linear.match(/[ML]/g)).toHaveLength(7)
})

test.each([320, 800, 2000])('everything stays inside a figure of %i px', (width) => {
  const shown = site([
    [
      [0, 0],
      [100, 55]
    ],
    [
      [0, 0],
      [100, 54]
    ]
  ])
  for (const axis of ['linear', 'log'] as const) {
    const figure = curvesFigure(chart(shown), shown, { width, axis })
    for (const shape of figure.shapes) {
      if (shape.kind === 'rect' || shape.kind === 'clipped') {
        const box = shape.kind === 'clipped' ? shape.box : shape
        expect(box.x).toBeGreaterThanOrEqual(0)
        expect(box.x + box.width).toBeLessThanOrEqual(width)
        expect(box.height).toBeGreaterThanOrEqual(0)
      }
    }
  }
})

test('letters at the ends of curves that meet are set apart, in the order of the curves', () => {
  const shown = site([0, 1, 2].map((k) => [[0, 0] as const, [100, 30 + 0.01 * k] as const]))
  const { shapes } = curvesFigure(chart(shown), shown, { width: 800, axis: 'linear' })
  const plotEnd = 800 - 30
  const letters = shapes.filter(
    (shape) => shape.kind === 'text' && shape.look.startsWith('letter') && shape.x > plotEnd
  )
  const places = letters.map((shape) => (shape.kind === 'text' ? { text: shape.text, y: shape.y } : undefined)!)
  expect(places.map(({ text }) => text)).toEqual(['C', 'B', 'A'])
  for (let k = 1; k < places.length; k++) expect(places[k]!.y - places[k - 1]!.y).toBeGreaterThanOrEqual(14.9)
})

test('an infusion is a bar of its true length, a missed dose an outline', () => {
  const shown = site([
    [
      [0, 0],
      [100, 20]
    ]
  ])
  const dose = { kind: 'infusion', share: 1, label: 'dose' } as const
  const { shapes } = curvesFigure(
    chart(shown, [
      { ...dose, from: 0, to: 25, missed: false },
      { ...dose, from: 50, to: 75, missed: true }
    ]),
    shown,
    { width: 882, axis: 'linear' }
  )
  const bars = shapes.flatMap((shape) => (shape.kind === 'rect' && shape.look.startsWith('dose') ? [shape] : []))
  // 882 px less margins of 52 and 30 leave 800 px for 100 h.
  expect(bars.map(({ width }) => width)).toEqual([200, 200])
  expect(bars.map(({ look }) => look)).toEqual(['dose s0', 'dose missed s0'])
})

test('labels of moments that meet stand in rows, and no later line runs through one', () => {
  const shown = site([
    [
      [0, 0],
      [100, 20]
    ]
  ])
  const changes = [30, 34, 38].map((at) => ({ at, label: 'creatinine 1.9 mg/dL' }))
  const { shapes } = curvesFigure({ ...chart(shown), changes }, shown, { width: 800, axis: 'linear' })
  const texts = shapes.flatMap((shape) => (shape.kind === 'text' && shape.text.startsWith('creatinine') ? [shape] : []))
  expect(new Set(texts.map(({ y }) => y)).size).toBe(3)
  const lines = shapes.flatMap((shape) => (shape.kind === 'line' && shape.look === 'moment' ? [shape] : []))
  for (const [k, text] of texts.entries()) {
    for (const later of lines.slice(k + 1)) expect(later.y1).toBeGreaterThan(text.y - 5)
  }
})

test('text in a figure is text: markup in a name becomes no element', () => {
  const element = svgElement({ kind: 'text', x: 0, y: 0, anchor: 'start', text: '<script>', look: 'label' })
  expect(element.children).toEqual([])
  expect(element.text).toBe('<script>')
})
