import { ONE, product, quotient, type Ratio } from './ratio'

/**
 * The closed table of unit codes (UCUM, ucum.org) by kind. Kinds, not dimensions, decide what fits: a body weight is not
 * an amount of drug, an age is not a time, an indexed filtration rate is not an absolute one.
 * Canonical units are those of `canonical.ts`; for kinds beside them the first code of the kind.
 */
export interface Unit {
  readonly code: string
  /** canonical = value x times / per (x molar mass in g/mol to the power `moles`). */
  readonly ratio: Ratio
  /** 1: moles in the numerator; -1: in the denominator; 0: none. */
  readonly moles: -1 | 0 | 1
  /** Reckoned on the patient, in doses only. */
  readonly reckonedPer: 'dose' | 'kg' | 'm2'
}

const of = (code: string, times: number, per = 1, moles: -1 | 0 | 1 = 0): Unit => ({
  code,
  ratio: times === 1 && per === 1 ? ONE : { times, per },
  moles,
  reckonedPer: 'dose'
})

const TIME = [of('h', 1), of('min', 1, 60), of('s', 1, 3600), of('d', 24), of('wk', 168)]
const AMOUNT_BY_MASS = [of('mg', 1), of('g', 1000), of('ug', 1, 1000), of('ng', 1, 1_000_000)]
const PICOGRAM = of('pg', 1, 1_000_000_000)
// One mmol of a substance of M g/mol is M mg.
const AMOUNT_BY_MOLES = [of('mmol', 1, 1, 1), of('umol', 1, 1000, 1), of('nmol', 1, 1_000_000, 1)]
const AMOUNT = [...AMOUNT_BY_MASS, ...AMOUNT_BY_MOLES]
const VOLUME = [of('L', 1), of('mL', 1, 1000)]
const DECILITRE = of('dL', 1, 10)

/** Every numerator over every denominator, in the order given. */
function over(numerators: readonly Unit[], denominators: readonly Unit[]): Unit[] {
  return numerators.flatMap((top) =>
    denominators.map((bottom) => ({
      code: `${top.code}/${bottom.code}`,
      ratio: quotient(top.ratio, bottom.ratio),
      moles: moles(top.moles - bottom.moles),
      reckonedPer: 'dose' as const
    }))
  )
}

function moles(power: number): -1 | 0 | 1 {
  if (power === -1 || power === 0 || power === 1) return power
  throw new RangeError(`no unit holds moles to the power ${power}`)
}

/** `mg/kg` and the like: the amount alone is converted, the weight is the patient's. */
function perPatient(amounts: readonly Unit[]): Unit[] {
  return (['kg', 'm2'] as const).flatMap((basis) =>
    amounts.map((amount) => ({ ...amount, code: `${amount.code}/${basis}`, reckonedPer: basis }))
  )
}

/** Area under a concentration curve, with time before or after the amount: `mg.h/L` and `h.mg/L`. */
function area(amounts: readonly Unit[], volumes: readonly Unit[]): Unit[] {
  return amounts.flatMap((amount) =>
    volumes.flatMap((volume) =>
      TIME.filter((time) => time.code !== 's' && time.code !== 'wk').flatMap((time) => {
        const ratio = quotient(product(amount.ratio, time.ratio), volume.ratio)
        return [
          { ...amount, ratio, code: `${amount.code}.${time.code}/${volume.code}` },
          { ...amount, ratio, code: `${time.code}.${amount.code}/${volume.code}` }
        ]
      })
    )
  )
}

const perTime = (units: readonly Unit[], codes: readonly string[]): Unit[] =>
  over(
    units,
    TIME.filter((time) => codes.includes(time.code))
  )

const FLOW = perTime(VOLUME, ['h', 'min', 'd', 's'])
const CONCENTRATION_BY_MASS = [
  ...over([...AMOUNT_BY_MASS, PICOGRAM], VOLUME),
  ...over(
    AMOUNT_BY_MASS.filter((amount) => amount.code !== 'ng'),
    [DECILITRE]
  )
]
const CONCENTRATION = [...CONCENTRATION_BY_MASS, ...over(AMOUNT_BY_MOLES, VOLUME)]
const DOSE_AMOUNT = [...AMOUNT, ...perPatient(AMOUNT_BY_MASS)]

const TABLE = {
  amount: AMOUNT,
  dose: DOSE_AMOUNT,
  doseRate: perTimeOfDose(DOSE_AMOUNT),
  time: TIME,
  // An area divided by a MIC, which is stated in hours and in no other unit of time.
  hours: [of('h', 1)],
  age: [of('a', 1), of('mo', 1, 12), of('wk', 28, 1461), of('d', 4, 1461)],
  ageInWeeks: [of('wk', 1), of('d', 1, 7), of('mo', 487, 112), of('a', 1461, 28)],
  bodyWeight: [of('kg', 1), of('g', 1, 1000)],
  height: [of('cm', 1), of('m', 100)],
  surfaceArea: [of('m2', 1)],
  bodyMassIndex: [of('kg/m2', 1)],
  // 1 mg/dL = 88.4 umol/L, fixed for creatinine whatever the drug.
  creatinine: [of('mg/dL', 1), of('umol/L', 5, 442)],
  cystatin: [of('mg/L', 1), of('mg/dL', 10)],
  albumin: [of('g/L', 1), of('g/dL', 10)],
  filtration: perTime(VOLUME, ['h', 'min']),
  indexedFiltration: [of('mL/min/{1.73_m2}', 1)],
  concentration: CONCENTRATION,
  massConcentration: CONCENTRATION_BY_MASS,
  area: area(AMOUNT, VOLUME),
  clearance: FLOW,
  volume: VOLUME,
  rateConstant: TIME.map((time) => ({ ...time, code: `/${time.code}`, ratio: quotient(ONE, time.ratio) })),
  amountRate: perTime(AMOUNT, ['h', 'min', 'd']),
  association: perTime(over(VOLUME, AMOUNT), ['h', 'min', 'd', 's']),
  fraction: [of('1', 1), of('%', 1, 100)],
  number: [of('1', 1)],
  molarMass: [of('g/mol', 1), of('kg/mol', 1000)]
} as const satisfies Record<string, readonly Unit[]>

function perTimeOfDose(amounts: readonly Unit[]): Unit[] {
  return amounts.flatMap((amount) =>
    TIME.filter((time) => time.code === 'h' || time.code === 'min').map((time) => ({
      ...amount,
      code: `${amount.code}/${time.code}`,
      ratio: quotient(amount.ratio, time.ratio)
    }))
  )
}

/** What a quantity is of; decides which units it may be in. */
export type Kind = keyof typeof TABLE

/** What each kind is called in a sentence: "mg/kg is not a unit of body weight". */
export const KIND_NAMES: Readonly<Record<Kind, string>> = {
  amount: 'amount of drug',
  dose: 'dose',
  doseRate: 'dose rate',
  time: 'time',
  hours: 'hours (an area divided by the MIC)',
  age: 'age',
  ageInWeeks: 'age',
  bodyWeight: 'body weight',
  height: 'height',
  surfaceArea: 'body surface area',
  bodyMassIndex: 'body mass index',
  creatinine: 'serum creatinine',
  cystatin: 'cystatin C',
  albumin: 'albumin',
  filtration: 'absolute filtration rate or clearance',
  indexedFiltration: 'filtration rate indexed to 1.73 m2',
  concentration: 'drug concentration',
  massConcentration: 'concentration by mass',
  area: 'area under a concentration curve',
  clearance: 'clearance',
  volume: 'volume',
  rateConstant: 'rate constant',
  amountRate: 'amount per time',
  association: 'second-order rate constant',
  fraction: 'fraction',
  number: 'pure number',
  molarMass: 'molar mass'
}

export const KINDS = Object.keys(TABLE) as Kind[]

const BY_CODE = new Map<Kind, ReadonlyMap<string, Unit>>(
  KINDS.map((kind) => [kind, new Map(TABLE[kind].map((unit) => [unit.code, unit]))])
)

/** The unit of that code among those of the kind; undefined for any other. */
export function unitOf(kind: Kind, code: string): Unit | undefined {
  return BY_CODE.get(kind)?.get(code)
}

/** Every unit of the kind, the canonical one first. */
export function unitsOf(kind: Kind): readonly Unit[] {
  return TABLE[kind]
}
