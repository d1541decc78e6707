import type { ChartView } from './chart'
import type { Prose } from './prose'

/**
 * Everything that the page shows of one study, as plain data: text is ready to print, numbers are rounded for the
 * screen, and curves are sampled. It crosses from the worker to the page as it is; nothing is computed after it.
 */
export interface PageView {
  readonly title: string
  /** The title as it is edited in place. */
  readonly heading: Prose
  /** Program version and study hash: what makes the page reproducible. */
  readonly provenance: string
  /** Cautions that apply to this study; empty where none does. */
  readonly cautions: readonly string[]
  readonly regimens: readonly RegimenLabel[]
  readonly note: NoteView
  readonly chart: ChartView
  readonly exposure: readonly GridView[]
  readonly phases: PhasesView
  readonly table: TableView
}

/** How a regimen is told apart without colour: its letter, its dash and its name. `style` counts from 0 and chooses colour and dash. */
export interface RegimenLabel {
  readonly letter: string
  readonly name: string
  readonly style: number
}

/** The consult note; what was typed in it carries its place in the study file. */
export interface NoteView {
  readonly patient: readonly Prose[]
  /** Size and renal estimates side by side, a column a stretch of time. */
  readonly estimates: EstimatesView
  readonly population: readonly PopulationLine[]
  readonly model: ModelView
  readonly regimens: readonly RegimenNote[]
  readonly targets: readonly Prose[]
  /** How far and how finely the study is computed, in sentences. */
  readonly course: Prose
  /** What was found, in sentences. */
  readonly findings: readonly Prose[]
}

export interface EstimatesView {
  /** One a stretch of time, `at 0 h`; empty where the patient does not change. */
  readonly columns: readonly string[]
  readonly groups: readonly {
    readonly title: string
    readonly rows: readonly EstimateRow[]
    /** What could not be computed, and why; empty where all was. */
    readonly missing: string
  }[]
}

export interface EstimateRow {
  readonly label: string
  /** One a stretch; text with unit, or why it was not computed. */
  readonly values: readonly { readonly text: string; readonly computed: boolean }[]
  /** What in the model takes this very value; empty where it is not used. */
  readonly usedBy: string
}

/** One covariate against the people that the model was built on. */
export interface PopulationLine {
  readonly standing: 'inside' | 'outside' | 'unknown' | 'note'
  readonly text: string
}

export interface ModelView {
  readonly title: string
  readonly sentence: Prose
  /** The relations as equations, with their value for this patient. */
  readonly equations: readonly Prose[]
  readonly source: Prose
}

export interface RegimenNote {
  readonly label: RegimenLabel
  /** Its name as it is edited in place. */
  readonly name: Prose
  readonly sentence: Prose
  /** What was done with the prescription and a reader must know. */
  readonly notes: readonly string[]
  /** How many dose lines it has. */
  readonly lines: number
  /** Each scheduled dose, the first of a long list only. */
  readonly doses: readonly ScheduledDose[]
  /** Why it cannot be removed; empty where it can. */
  readonly keptBecause: string
}

export interface ScheduledDose {
  /** Position of the dose line, and the number of the dose in it from 1. */
  readonly line: number
  readonly number: number
  readonly missed: boolean
  /** `36 h: 500 mg`. */
  readonly text: string
}

/** A table of quantities (rows) by regimens or the like (columns). */
export interface GridView {
  readonly title: string
  /** What the numbers hold for, in small type. */
  readonly explanation: string
  readonly columns: readonly GridColumn[]
  readonly rows: readonly GridRow[]
  /** Why a value is not defined, by the mark in its cell, then what is not defined anywhere; small type below. */
  readonly notes: readonly { readonly mark: string; readonly text: string }[]
  /** Folded away until asked for. */
  readonly folded: boolean
}

export interface GridColumn {
  readonly title: string
  /** The regimen whose colour and dash the head carries. */
  readonly regimen?: RegimenLabel
}

export interface GridRow {
  readonly head: string
  readonly cells: readonly GridCell[]
}

export interface GridCell {
  /** A number, or a dash where it is not defined. */
  readonly text: string
  /** Of the note that says why it is not defined. */
  readonly mark?: string
  /** Against a target. */
  readonly met?: boolean
}

export interface PhasesView {
  readonly blocks: readonly PhasesBlock[]
  /** Why there are none. */
  readonly why?: string
  /** When distribution is over, when steady state is near: a line a regimen. */
  readonly sampling: GridView
}

/** The phases over one stretch between patient changes. */
export interface PhasesBlock {
  readonly title: string
  readonly table: GridView
  readonly sentences: readonly Prose[]
  /** Absent where the disposition has no such sum. */
  readonly figure?: PhaseCurves
}

/** The response to a bolus into the observed compartment and its parts, in a share of the value at 0. */
export interface PhaseCurves {
  readonly times: readonly number[]
  readonly timeUnit: string
  readonly hoursPerUnit: number
  readonly total: readonly number[]
  readonly parts: readonly { readonly label: string; readonly values: readonly number[]; readonly ruling: boolean }[]
  readonly label: string
}

/** The concentration table; its rows are asked for a page at a time. */
export interface TableView {
  readonly columns: readonly { readonly title: string; readonly unit: string; readonly numeric: boolean }[]
  readonly regimens: readonly { readonly label: RegimenLabel; readonly rows: number }[]
}
