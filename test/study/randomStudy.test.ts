import { describe, expect, test } from 'vitest'
import { readModel } from '../../src/study/file/readModel'
import { readStudy } from '../../src/study/file/readStudy'
import { serialiseStudy } from '../../src/study/serialise'
import { Draw } from './draw'
import { type Json, model, shippedModel } from './example'
import { randomStudy } from './randomStudy'

const SEEDS = Array.from({ length: 200 }, (_, i) => 20_260 + i)

/** Every object and list in a value, with the key or position of each member. */
function* places(value: unknown, inside = ''): Generator<{ holder: Json; key: string; inside: string }> {
  if (typeof value !== 'object' || value === null) return
  for (const key of Object.keys(value)) {
    yield { holder: value as Json, key, inside }
    yield* places((value as Json)[key], Number.isNaN(Number(key)) ? key : inside)
  }
}

const isQuantity = (value: unknown): value is { value: number; unit: string } =>
  typeof value === 'object' && value !== null && 'value' in value && 'unit' in value && typeof value.value === 'number'

/** Ways to break a file, each of which leaves nothing valid whatever place it is done at. */
const BREAKAGES: Readonly<Record<string, (file: Json, draw: Draw) => boolean>> = {
  'a key renamed': (file, draw) => {
    const { holder, key } = draw.of([...places(file)].filter(({ holder }) => !Array.isArray(holder)))
    const value = holder[key]
    delete holder[key]
    holder[`${key}x`] = value
    return true
  },
  'a value replaced by null': (file, draw) => {
    const { holder, key } = draw.of([...places(file)])
    holder[key] = null
    return true
  },
  'a quantity without its unit': (file, draw) => onQuantity(file, draw, (quantity) => quantity.value),
  'a unit that does not exist': (file, draw) =>
    onQuantity(file, draw, ({ value, unit }) => ({ value, unit: draw.of(['mcg', 'hr', 'foo', '', `${unit}x`]) })),
  'a quantity as text': (file, draw) => onQuantity(file, draw, ({ value, unit }) => `${value} ${unit}`),
  'a number as text': (file, draw) => onQuantity(file, draw, ({ value, unit }) => ({ value: `${value}`, unit })),
  'a key too many': (file, draw) => {
    const { holder } = draw.of([...places(file)].filter(({ holder }) => !Array.isArray(holder)))
    holder.comment = 'x'
    return true
  },
  'a route that does not exist': (file, draw) => {
    const { doses } = draw.of(file.regimens as { doses: Json[] }[])
    draw.of(doses).route = 'by mouth'
    return true
  }
}

function onQuantity(file: Json, draw: Draw, change: (quantity: { value: number; unit: string }) => unknown): boolean {
  const quantities = [...places(file)].filter(({ holder, key }) => isQuantity(holder[key]))
  if (quantities.length === 0) return false
  const { holder, key } = draw.of(quantities)
  holder[key] = change(holder[key] as { value: number; unit: string })
  return true
}

describe('any valid random study', () => {
  test.each(SEEDS)('is read into finite numbers and saved without loss: seed %i', (seed) => {
    const text = JSON.stringify(randomStudy(seed))
    const reading = readStudy(text, shippedModel)
    if (!reading.ok) return expect.fail(JSON.stringify(reading.issues))
    expect(JSON.parse(serialiseStudy(reading.file))).toEqual(JSON.parse(text))
    for (const number of numbersIn(reading.study)) expect(Number.isFinite(number)).toBe(true)
  })
})

function* numbersIn(value: unknown): Generator<number> {
  if (typeof value === 'number') yield value
  else if (typeof value === 'object' && value !== null)
    for (const member of Object.values(value)) yield* numbersIn(member)
}

describe('a random study broken at one place', () => {
  test.each(Object.keys(BREAKAGES))('%s is refused with a listed problem, and nothing is thrown', (title) => {
    const breakAt = BREAKAGES[title]!
    let broken = 0
    for (const seed of SEEDS) {
      const file = randomStudy(seed)
      if (!breakAt(file, new Draw(seed + 1))) continue
      broken += 1
      const reading = readStudy(JSON.stringify(file), shippedModel)
      if (reading.ok) expect.fail(`seed ${seed}: accepted ${JSON.stringify(file)}`)
      else {
        expect(reading.issues.length, `seed ${seed}`).toBeGreaterThan(0)
        for (const { path, message } of reading.issues)
          expect(`${path}: ${message}`, `seed ${seed}`).toMatch(/^[^\n]*: [^\n]+$/)
      }
    }
    expect(broken).toBeGreaterThan(100)
  })

  test('as text (a character lost, doubled or replaced) is accepted or refused, and nothing is thrown', () => {
    let refused = 0
    for (const seed of SEEDS) {
      const draw = new Draw(seed)
      const text = JSON.stringify(randomStudy(seed))
      const at = draw.whole(0, text.length - 1)
      const changed = text.slice(0, at) + draw.of(['', text[at]!.repeat(2), '"', '}', '0', '-']) + text.slice(at + 1)
      const reading = readStudy(changed, shippedModel)
      if (!reading.ok) {
        refused += 1
        expect(reading.issues.length).toBeGreaterThan(0)
      }
    }
    expect(refused).toBeGreaterThan(100)
  })

  test('by any value in any place is accepted or refused, and nothing is thrown', () => {
    const values = [
      null,
      true,
      -1,
      0,
      1e308,
      5e-324,
      0.5,
      '',
      'x',
      [],
      {},
      [[]],
      { kind: 'x' },
      { value: 1, unit: 'h' },
      { value: -1, unit: 'kg' },
      'constructor',
      'oral'
    ]
    for (const seed of SEEDS) {
      const draw = new Draw(seed)
      for (const [content, read] of [
        [randomStudy(seed), (text: string) => readStudy(text, shippedModel)],
        [model(draw.of(['pw-101', 'pw-102', 'pw-105', 'pw-107', 'pw-108'])), (text: string) => readModel(text)]
      ] as const) {
        const all = [...places(content)]
        for (let n = draw.whole(1, 3); n > 0; n--) {
          const { holder, key } = draw.of(all)
          if (draw.chance(0.3)) delete holder[key]
          else holder[key] = draw.of(values)
        }
        const reading = read(JSON.stringify(content))
        if (!reading.ok) expect(reading.issues.length).toBeGreaterThan(0)
      }
    }
  })
})
