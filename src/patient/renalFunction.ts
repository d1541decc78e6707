import { pow } from '../numerics/elementary'
import type { Centimetres, Kilograms, LitresPerHour, SquareMetres } from '../units/canonical'
import type { Sex } from './bodySize'

/** A filtration rate indexed to 1.73 m2 of body surface. An object of its own kind, so that it never passes for a flow. */
export interface IndexedFiltration {
  readonly kind: 'indexed'
  readonly mlPerMinPer173: number
}

/** A filtration rate of this body: a flow. */
export interface AbsoluteFiltration {
  readonly kind: 'absolute'
  readonly mlPerMin: number
}

/** De-indexed: x body surface area / 1.73 m2. The only way from the one kind to the other. */
export function absoluteFrom(indexed: IndexedFiltration, surfaceArea: SquareMetres): AbsoluteFiltration {
  return { kind: 'absolute', mlPerMin: (indexed.mlPerMinPer173 * surfaceArea) / 1.73 }
}

/** 1 mL/min = 3/50 L/h. */
export function litresPerHour(flow: AbsoluteFiltration): LitresPerHour {
  return (flow.mlPerMin * 3) / 50
}

/** Creatinine clearance with the weight that the caller chose. Cockcroft DW, Gault MH 1976 Nephron 16:31. From 18 years. */
export function cockcroftGault(person: {
  sex: Sex
  ageYears: number
  weight: Kilograms
  serumCreatinineMgPerDl: number
}): AbsoluteFiltration {
  const men = ((140 - person.ageYears) * person.weight) / (72 * person.serumCreatinineMgPerDl)
  return { kind: 'absolute', mlPerMin: person.sex === 'female' ? 0.85 * men : men }
}

/** CKD-EPI 2021, creatinine. Inker LA et al 2021 N Engl J Med 385:1737. From 18 years. */
export function ckdEpi2021Creatinine(person: {
  sex: Sex
  ageYears: number
  serumCreatinineMgPerDl: number
}): IndexedFiltration {
  const women = person.sex === 'female'
  const ratio = person.serumCreatinineMgPerDl / (women ? 0.7 : 0.9)
  return indexed(
    142 * hinged(ratio, women ? -0.241 : -0.302, -1.2) * pow(0.9938, person.ageYears) * (women ? 1.012 : 1)
  )
}

/**
 * CKD-EPI 2021, creatinine and cystatin C. Inker LA et al 2021 N Engl J Med 385:1737 (coefficients from memory).
 * From 18 years.
 */
export function ckdEpi2021CreatinineCystatin(person: {
  sex: Sex
  ageYears: number
  serumCreatinineMgPerDl: number
  cystatinCMgPerL: number
}): IndexedFiltration {
  const women = person.sex === 'female'
  const creatinine = hinged(person.serumCreatinineMgPerDl / (women ? 0.7 : 0.9), women ? -0.219 : -0.144, -0.544)
  const cystatin = hinged(person.cystatinCMgPerL / 0.8, -0.323, -0.778)
  return indexed(135 * creatinine * cystatin * pow(0.9961, person.ageYears) * (women ? 0.963 : 1))
}

/** CKD-EPI 2012, cystatin C. Inker LA et al 2012 N Engl J Med 367:20. From 18 years. */
export function ckdEpi2012Cystatin(person: { sex: Sex; ageYears: number; cystatinCMgPerL: number }): IndexedFiltration {
  const cystatin = hinged(person.cystatinCMgPerL / 0.8, -0.499, -1.328)
  return indexed(133 * cystatin * pow(0.996, person.ageYears) * (person.sex === 'female' ? 0.932 : 1))
}

/**
 * Four-variable MDRD for creatinine traceable to isotope dilution mass spectrometry, without its factor for race.
 * Levey AS et al 2006 Ann Intern Med 145:247. From 18 years.
 */
export function mdrd(person: { sex: Sex; ageYears: number; serumCreatinineMgPerDl: number }): IndexedFiltration {
  const men = 175 * pow(person.serumCreatinineMgPerDl, -1.154) * pow(person.ageYears, -0.203)
  return indexed(person.sex === 'female' ? 0.742 * men : men)
}

/** Bedside Schwartz: 0.413 height / creatinine. Schwartz GJ et al 2009 J Am Soc Nephrol 20:629. From 1 to under 18 years. */
export function bedsideSchwartz(person: { height: Centimetres; serumCreatinineMgPerDl: number }): IndexedFiltration {
  return indexed((0.413 * person.height) / person.serumCreatinineMgPerDl)
}

function indexed(mlPerMinPer173: number): IndexedFiltration {
  return { kind: 'indexed', mlPerMinPer173 }
}

/** min(ratio, 1)^below x max(ratio, 1)^above, the two-slope form that all CKD-EPI equations share. */
function hinged(ratio: number, below: number, above: number): number {
  return pow(Math.min(ratio, 1), below) * pow(Math.max(ratio, 1), above)
}
