import { describe, expect, test } from 'vitest'
import type { Place } from '../../../src/study/edit/place'
import { readTyped, typedText } from '../../../src/study/edit/readTyped'
import { stepOf, stepped } from '../../../src/study/edit/step'
import { q } from '../example'

const dose: Place = {
  path: ['x'],
  label: 'dose',
  kind: 'quantity',
  quantity: q(750, 'mg'),
  of: 'dose',
  sign: 'positive'
}
const share: Place = { path: ['x'], label: 'share', kind: 'share', share: 0.07 }
const count: Place = { path: ['x'], label: 'count', kind: 'whole', whole: 6, optional: true }
const own: Place = { path: ['x'], label: 'score', kind: 'quantity', quantity: q(3, '{score}'), sign: 'any' }
const name: Place = { path: ['x'], label: 'name', kind: 'text', text: 'A', longest: 5, optional: false }
const sex: Place = {
  path: ['x'],
  label: 'sex',
  kind: 'choice',
  choices: [
    { value: 'female', text: 'woman' },
    { value: 'male', text: 'man' }
  ]
}

describe('what is typed at a place', () => {
  test.each([
    [dose, '1.2 g', q(1.2, 'g')],
    [dose, '800', q(800, 'mg')],
    [share, '90', 0.9],
    [share, '0.5 %', 0.005],
    [share, '7 %', 0.07],
    [count, '4', 4],
    [count, ' ', undefined],
    [own, '4', q(4, '{score}')],
    [own, '-4 {score}', q(-4, '{score}')],
    [name, ' B ', 'B'],
    [sex, 'male', 'male']
  ])('%#: %j is read', (place, text, value) => {
    expect(readTyped(place, text)).toEqual({ ok: true, value })
  })

  test.each([
    [dose, '0 mg', 'greater than 0'],
    [dose, '-5', 'greater than 0'],
    [dose, '5 mL', 'not a unit'],
    [share, '120', 'at most 100'],
    [share, '0 %', 'over 0'],
    [count, '0', 'whole number'],
    [count, '2.5', 'whole number'],
    [own, '4 g', '{score}'],
    [name, '', 'not be empty'],
    [name, 'ABCDEF', 'at most 5'],
    [sex, 'other', 'woman, man']
  ])('%#: %j is refused, with what would be right', (place, text, message) => {
    const answer = readTyped(place, text)
    expect(answer.ok ? '' : answer.message).toContain(message)
  })

  test('850 mcg is answered with ug, and accepting that is no change of the value', () => {
    const answer = readTyped(dose, '850 mcg')
    expect(answer).toEqual({ ok: false, message: 'ug?', offer: { text: '850 ug', spelling: true } })
    expect(readTyped(dose, '850 ug')).toEqual({ ok: true, value: q(850, 'ug') })
  })

  test('a comma is never taken for a point by one key', () => {
    expect(readTyped(dose, '1,2 g')).toMatchObject({ ok: false, offer: { text: '1.2 g', spelling: false } })
  })

  test('a bare share of at most 1 is asked about', () => {
    expect(readTyped(share, '0.9')).toMatchObject({ ok: false, offer: { text: '90 %', spelling: false } })
  })

  test('a value as text is the value again', () => {
    for (const place of [dose, share, count, own, name]) {
      expect(readTyped(place, typedText(place))).toMatchObject({ ok: true })
    }
    expect(typedText(share)).toBe('7 %')
  })
})

describe('arrow keys', () => {
  test.each([
    ['750 mg', '760 mg', '850 mg'],
    ['58 kg', '59 kg', '68 kg'],
    ['1.6 mg/dL', '1.7 mg/dL', '2.6 mg/dL'],
    ['1.60 mg/dL', '1.61 mg/dL', '1.70 mg/dL'],
    ['500', '510', '600'],
    ['20 mg/kg', '21 mg/kg', '30 mg/kg'],
    ['0 h', '1 h', '10 h'],
    ['.5 g', '0.6 g', '1.5 g'],
    ['-3 h', '-2 h', '7 h'],
    ['90 %', '91 %', '100 %']
  ])('move %s by its last significant digit, and with Shift tenfold', (text, once, tenfold) => {
    const power = stepOf(text)!
    expect(stepped(text, power, 1).text).toBe(once)
    expect(stepped(text, power + 1, 1).text).toBe(tenfold)
  })

  test('a step up and a step down come back', () => {
    for (const text of ['750 mg', '58 kg', '1.6 mg/dL', '0.05 h']) {
      const power = stepOf(text)!
      expect(stepped(stepped(text, power, 1).text, power, -1).text).toBe(text)
    }
  })

  test('a number over 0 stays over 0, by smaller steps', () => {
    expect(stepped('1 h', 0, -1)).toEqual({ text: '0.9 h', power: -1 })
    expect(stepped('0.1 h', -1, -1)).toEqual({ text: '0.09 h', power: -2 })
  })

  test('what is no plain number is left alone', () => {
    for (const text of ['', 'kg', '1,200 mg', '1e3 mg']) expect(stepOf(text), text).toBeUndefined()
  })
})
