import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { leanWeightOf } from '../../src/patient/bodyEstimates'
import {
  adjustedWeight,
  bodyMassIndex,
  devine,
  duBois,
  gehanGeorge,
  haycock,
  james,
  jamesTurningPoint,
  janmahasatian,
  mosteller,
  type Sex
} from '../../src/patient/bodySize'
import type { Person } from '../../src/patient/person'
import { weightBy } from '../../src/patient/weightDescriptor'
import { expectWithin } from '../expectWithin'

// Data set Remifentanil of the R package nlme (data of Minto CF et al 1997 Anesthesiology 86:10): every second subject's
// sex, height [cm], weight [kg], and the surface area (Du Bois) and lean weight (James) that the authors computed.
const subjects = readFileSync('test/reference/bodySize.csv', 'utf8')
  .trim()
  .split(/\r?\n/)
  .slice(1)
  .map((line) => {
    const [id, , sex, height, weight, area, lean] = line.split(',')
    return {
      id: id!,
      sex: sex!.toLowerCase() as Sex,
      height: Number(height),
      weight: Number(weight),
      area: Number(area),
      lean: Number(lean)
    }
  })

describe('published body sizes, one by one', () => {
  test('there are 33', () => expect(subjects).toHaveLength(33))

  // Printed to four decimals, so half a unit of the last one.
  test.each(subjects)('subject $id: Du Bois and James as printed', ({ area, lean, ...body }) => {
    expectWithin(duBois(body), area, { absolute: 5e-5 }, 'surface area')
    expectWithin(james(body), lean, { absolute: 5e-5 }, 'lean weight')
  })
})

describe('surface area', () => {
  // Mosteller 1987 NEJM 317:1098; Du Bois 1916 Arch Intern Med 17:863; Haycock 1978 J Pediatr 93:62; Gehan & George 1970.
  // Expected numbers recomputed from the published coefficients with independent code.
  test.each([
    [70, 170, 1.81811868577, 1.80970780175, 1.82567712478, 1.83128931342],
    [20, 115, 0.799305253885, 0.800405392805, 0.7971404569, 0.814869882221],
    [3.5, 50, 0.220479275922, 0.208616423512, 0.224414957436, 0.233760099369],
    [120, 180, 2.44948974278, 2.37187020406, 2.49547940949, 2.47567588741]
  ])('%d kg and %d cm by four equations', (weight, height, byMosteller, byDuBois, byHaycock, byGehanGeorge) => {
    const body = { weight, height }
    expectWithin(mosteller(body), byMosteller, { relative: 1e-9 }, 'Mosteller')
    expectWithin(duBois(body), byDuBois, { relative: 1e-9 }, 'Du Bois')
    expectWithin(haycock(body), byHaycock, { relative: 1e-9 }, 'Haycock')
    expectWithin(gehanGeorge(body), byGehanGeorge, { relative: 1e-9 }, 'Gehan and George')
  })
})

describe('ideal and adjusted weight', () => {
  // Devine BJ 1974 Drug Intell Clin Pharm 8:650.
  test.each([
    [152.4, 50, 45.5],
    [165.1, 61.5, 57],
    [177.8, 73, 68.5],
    [182.88, 77.6, 73.1]
  ])('Devine at %d cm', (height, man, woman) => {
    expectWithin(devine({ sex: 'male', height }), man, { relative: 1e-9 }, 'man')
    expectWithin(devine({ sex: 'female', height }), woman, { relative: 1e-9 }, 'woman')
  })

  test('adjusted weight of a man of 177.8 cm and 110 kg is 87.8 kg', () => {
    const ideal = devine({ sex: 'male', height: 177.8 })
    expectWithin(adjustedWeight({ actual: 110, ideal }), 87.8, { relative: 1e-9 })
  })
})

describe('lean weight', () => {
  // Janmahasatian S et al 2005 Clin Pharmacokinet 44:1051; expected numbers recomputed with independent code.
  test.each([
    [70, 170, 'male', 54.4752390691],
    [110, 178, 'male', 71.9159445432],
    [60, 165, 'female', 39.286845659],
    [150, 160, 'female', 60.2551255315],
    [160, 180, 'male', 85.5034588779]
  ] as const)('Janmahasatian, %d kg, %d cm, %s', (weight, height, sex, expected) => {
    expectWithin(janmahasatian({ sex, weight, height }), expected, { relative: 1e-9 })
  })

  // The parabola's vertex: a body mass index of 1.1e4/256 in men and 1.07e4/296 in women.
  test.each([
    ['male', 42.96875],
    ['female', 36.148648648648646]
  ] as const)('James turns over in a %s at a body mass index of %d', (sex, index) => {
    const weight = jamesTurningPoint({ sex, height: 170 })
    expectWithin(bodyMassIndex({ weight, height: 170 }), index, { relative: 1e-12 })
    const at = james({ sex, weight, height: 170 })
    expect(james({ sex, weight: weight - 5, height: 170 })).toBeLessThan(at)
    expect(james({ sex, weight: weight + 5, height: 170 })).toBeLessThan(at)
  })
})

function body(sex: Sex, weight: number, height: number, more: Readonly<Record<string, number>> = {}): Person {
  return { sex, numbers: { age: 40, weight, height, ...more }, categories: {}, renalReplacement: 'none' }
}

function value(word: Parameters<typeof weightBy>[0], person: Person): number {
  const estimate = weightBy(word, person)
  return estimate.kind === 'computed' ? estimate.value : Number.NaN
}

describe('the words by which a weight is named', () => {
  const ideal = 73 // a man of 177.8 cm, by Devine

  test.each([
    [60, 60, 60, 60],
    [80, 75.8, ideal, ideal],
    [ideal * 1.2, ideal * 1.08, ideal, ideal],
    [88, 79, ideal, 79],
    [110, 87.8, ideal, 87.8]
  ])('a man of %d kg: adjusted %d, actual if below ideal %d, adjusted above 120 %% %d', (weight, ...expected) => {
    const person = body('male', weight, 177.8)
    expectWithin(value('actual', person), weight, { relative: 1e-15 })
    expectWithin(value('ideal', person), ideal, { relative: 1e-12 })
    expectWithin(value('adjusted', person), expected[0]!, { relative: 1e-12 }, 'adjusted')
    expectWithin(value('actualIfBelowIdeal', person), expected[1]!, { relative: 1e-12 }, 'smaller')
    expectWithin(value('adjustedAbove120PercentIdeal', person), expected[2]!, { relative: 1e-12 }, 'above 120 %')
  })

  test('120 % itself still takes the ideal weight, also where 1.2 x ideal rounds down', () => {
    const ideal = devine({ sex: 'male', height: 150 })
    const typed = 57.392125984252
    expect(typed).toBeGreaterThan(1.2 * ideal)
    expect(value('adjustedAbove120PercentIdeal', body('male', typed, 150))).toBe(ideal)
  })

  test('an ideal weight given directly stands for the computed one everywhere', () => {
    const person = body('male', 110, 177.8, { idealWeight: 60 })
    expect(value('ideal', person)).toBe(60)
    expectWithin(value('adjusted', person), 80, { relative: 1e-12 })
    expectWithin(value('adjustedAbove120PercentIdeal', person), 80, { relative: 1e-12 })
  })

  test('adjusted says where the actual weight stands in for it', () => {
    const adjusted = weightBy('adjusted', body('male', 60, 177.8))
    expect(adjusted.kind === 'computed' && adjusted.notes.map((note) => note.kind)).toEqual(['derived'])
  })

  test('Devine below 152.4 cm is extrapolated and says so, at 152.4 cm it is not', () => {
    const below = weightBy('ideal', body('female', 45, 150))
    expect(below.kind === 'computed' && below.notes[0]?.text).toContain('extrapolated below 152.4 cm, to 150 cm')
    const at = weightBy('ideal', body('female', 45, 152.4))
    expect(at.kind === 'computed' && at.notes).toEqual([])
  })

  test('Devine of a child so small that the line passes 0 is not computed', () => {
    const ideal = weightBy('ideal', body('female', 15, 95))
    expect(ideal.kind === 'not computed' && ideal.reason).toContain('which no body has')
  })

  test('a weight that cannot be computed says what it needs', () => {
    const nobody: Person = { numbers: { weight: 70 }, categories: {}, renalReplacement: 'none' }
    expect(weightBy('ideal', nobody)).toEqual({
      kind: 'not computed',
      reason: 'needs sex and height',
      missing: ['sex', 'height']
    })
    expect(weightBy('adjusted', nobody)).toMatchObject({ kind: 'not computed', missing: ['sex', 'height'] })
    expect(weightBy('actualIfBelowIdeal', nobody)).toMatchObject({ kind: 'not computed', missing: ['sex', 'height'] })
  })
})

describe('James is guarded at its turning point', () => {
  const turning = jamesTurningPoint({ sex: 'male', height: 178 })
  test('above it nothing is computed, with the reason', () => {
    const lean = leanWeightOf('james', body('male', turning + 0.1, 178))
    expect(lean.kind === 'not computed' && lean.reason).toContain('falls with weight above its turning point of 136 kg')
  })
  test('within 10 % below it, that is said', () => {
    const near = leanWeightOf('james', body('male', turning * 0.95, 178))
    expect(near.kind === 'computed' && near.notes.map((note) => note.kind)).toEqual(['edge'])
    const far = leanWeightOf('james', body('male', turning * 0.85, 178))
    expect(far.kind === 'computed' && far.notes).toEqual([])
  })
})
