import type { RegimenLabel } from './page'

/** The curves of every regimen and what stands on the same time axis; times in `timeUnit`. */
export interface ChartView {
  readonly timeUnit: string
  /** Hours in one `timeUnit`, to set days on the axis. */
  readonly hoursPerUnit: number
  readonly until: number
  /** Where concentrations are followed: the observed one first, then effect sites and further observations. */
  readonly sites: readonly SiteView[]
  /** The site to show at first: that of the first window. */
  readonly firstSite: number
  /** Where the patient changes. */
  readonly changes: readonly { readonly at: number; readonly label: string }[]
  readonly now?: number
  readonly sessions: readonly { readonly from: number; readonly to: number; readonly label: string }[]
  readonly lanes: readonly DoseLane[]
}

/** The concentration at one site, of every regimen. */
export interface SiteView {
  /** `plasma`, `brain`. */
  readonly name: string
  /** What is drawn, with its unit: `Concentration of PW-101 in plasma, mg/L`. */
  readonly title: string
  readonly curves: readonly CurveView[]
  readonly window?: { readonly low: number; readonly high: number; readonly label: string }
  /** The figure in words, for who does not see it. */
  readonly label: string
}

export interface CurveView {
  readonly regimen: RegimenLabel
  /** Ascending; a level after a bolus stands beside the one before it at the same time. */
  readonly times: Float64Array
  readonly values: Float64Array
}

/** The doses of one regimen on the time axis. */
export interface DoseLane {
  readonly regimen: RegimenLabel
  readonly doses: readonly DoseMark[]
}

export interface DoseMark {
  readonly kind: 'infusion' | 'bolus'
  readonly from: number
  readonly to: number
  /** Amount as a share of the largest dose on the figure. */
  readonly share: number
  readonly missed: boolean
  /** `750 mg over 1 h at 24 h`. */
  readonly label: string
}
