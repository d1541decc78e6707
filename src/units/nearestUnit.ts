import { type Kind, unitOf, unitsOf } from './unitTable'

/** Common spellings that are not UCUM, in lower case, and what they mean. Only spellings with one meaning are here. */
const SPELLINGS: ReadonlyMap<string, string> = new Map(
  Object.entries({
    mcg: 'ug',
    µg: 'ug',
    μg: 'ug',
    microgram: 'ug',
    micrograms: 'ug',
    milligram: 'mg',
    milligrams: 'mg',
    nanogram: 'ng',
    nanograms: 'ng',
    gram: 'g',
    grams: 'g',
    gm: 'g',
    gr: 'g',
    kilogram: 'kg',
    kilograms: 'kg',
    kgs: 'kg',
    µmol: 'umol',
    μmol: 'umol',
    micromol: 'umol',
    micromole: 'umol',
    micromoles: 'umol',
    millimole: 'mmol',
    millimoles: 'mmol',
    nanomole: 'nmol',
    nanomoles: 'nmol',
    liter: 'L',
    liters: 'L',
    litre: 'L',
    litres: 'L',
    lt: 'L',
    millilitre: 'mL',
    millilitres: 'mL',
    milliliter: 'mL',
    milliliters: 'mL',
    cc: 'mL',
    hr: 'h',
    hrs: 'h',
    hour: 'h',
    hours: 'h',
    mins: 'min',
    minute: 'min',
    minutes: 'min',
    sec: 's',
    secs: 's',
    second: 's',
    seconds: 's',
    day: 'd',
    days: 'd',
    week: 'wk',
    weeks: 'wk',
    wks: 'wk',
    month: 'mo',
    months: 'mo',
    year: 'a',
    years: 'a',
    yr: 'a',
    yrs: 'a',
    y: 'a',
    centimetre: 'cm',
    centimetres: 'cm',
    centimeter: 'cm',
    centimeters: 'cm',
    metre: 'm',
    metres: 'm',
    meter: 'm',
    meters: 'm',
    'm²': 'm2',
    'm^2': 'm2',
    sqm: 'm2',
    percent: '%',
    fraction: '1',
    ratio: '1',
    dimensionless: '1',
    unitless: '1',
    none: '1',
    '': '1'
  })
)

/** Molar concentrations as laboratories write them; upper-case M, so they are looked up as typed. */
const MOLAR: ReadonlyMap<string, string> = new Map(
  Object.entries({
    mM: 'mmol/L',
    uM: 'umol/L',
    µM: 'umol/L',
    μM: 'umol/L',
    nM: 'nmol/L'
  })
)

/** Ways of writing "per 1.73 m2 of body surface", blanks and braces taken out, lower case. */
const INDEXED = /\/\(?1[.,]73_?(?:m2|m\^2|m²|sqm)\)?$/

/**
 * The unit of the kind that a spelling outside UCUM stands for: `mcg` -> `ug`, `hr` -> `h`, `ml/min` -> `mL/min`,
 * `h*ng/mL` -> `h.ng/mL`. Only a change of spelling is offered, never a unit of another size that happens to look alike.
 */
export function nearestUnit(kind: Kind, typed: string): string | undefined {
  const molar = MOLAR.get(typed.trim())
  if (molar !== undefined && unitOf(kind, molar) !== undefined) return molar
  const text = typed
    .toLowerCase()
    .replaceAll(/\bper\b/g, '/')
    .replaceAll(/[\s{}]/g, '')
    .replaceAll(/[*·⋅×]/g, '.')
    .replace(/[_]+$/, '')
  const indexed = INDEXED.test(text)
  const codes = new Set(spelled(text.replace(INDEXED, '')))
  return unitsOf(kind).find((unit) => {
    const code = unit.code.replace('/{1.73_m2}', '')
    return indexed === (code !== unit.code) && codes.has(code.toLowerCase())
  })?.code
}

/** Lower-case codes that the text may stand for: each factor by its usual spelling, `x-1` and `1/x` as `/x`. */
function spelled(text: string): string[] {
  const inverse = text
    .replace(/^(?:1\/)/, '/')
    .replaceAll(/\.?([a-z]+)\^?[-−]1(?![0-9])/g, '/$1')
    .replaceAll(/\.?([a-z]+)⁻¹/g, '/$1')
  const whole = SPELLINGS.get(inverse)
  const parts = inverse.split(/([./])/).map((part) => {
    const known = part === '' ? undefined : SPELLINGS.get(part)
    return (known ?? part).toLowerCase()
  })
  return whole === undefined ? [parts.join('')] : [whole.toLowerCase(), parts.join('')]
}

/** Units in which the activity of a preparation is stated: they are no mass, and differ from drug to drug. */
const ACTIVITY =
  /(?:^|[./])(?:[kmu]|mega|milli|kilo)?(?:\[?i\.?u\.?\]?|\[?usp'?u\]?|units?|u|e|ie|kat|bq|ci|cfu|\[cfu\])(?=$|[./])/i

/** Whether the unit is one of activity (`[iU]`, `U`, `kIU/kg`); drugs measured so are not handled. */
export function isUnitOfActivity(typed: string): boolean {
  return ACTIVITY.test(typed.replaceAll(/[\s{}]/g, ''))
}
