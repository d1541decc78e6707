/** Covariates that are typed. Canonical: weight kg, height cm, age and postnatalAge a, gestationalAge and postmenstrualAge wk, serumCreatinine mg/dL, cystatinC mg/L, albumin g/L. */
export type TypedCovariate =
  | 'sex'
  | 'age'
  | 'gestationalAge'
  | 'postnatalAge'
  | 'postmenstrualAge'
  | 'weight'
  | 'height'
  | 'serumCreatinine'
  | 'cystatinC'
  | 'albumin'

/** Covariates that are computed, or given directly. Canonical: kg/m2, m2, kg, kg, kg, L/h, mL/min/{1.73_m2}, L/h. */
export type ComputedCovariate =
  | 'bodyMassIndex'
  | 'bodySurfaceArea'
  | 'idealWeight'
  | 'adjustedWeight'
  | 'leanWeight'
  | 'creatinineClearance'
  | 'estimatedGfr'
  | 'absoluteGfr'

/** Any covariate: typed, computed, or one that the model declares for itself. */
export type CovariateName = TypedCovariate | ComputedCovariate | (string & {})

/** A person over one stretch of time, in canonical units; only what was typed is there. */
export interface Person {
  readonly sex?: 'female' | 'male'
  /** Everything numeric that was typed or given directly, the model's own covariates included. */
  readonly numbers: Readonly<Partial<Record<CovariateName, number>>>
  /** The model's own categories. */
  readonly categories: Readonly<Record<string, string>>
  readonly dosingWeight?: number
  readonly renalReplacement: 'none' | 'intermittent' | 'continuous'
}
