/** One thing wrong with the input: where, what, and what would be right. Lower case, no full stop. */
export interface Issue {
  /** Like `regimens[0].doses[1].amount`; empty for the file as a whole. */
  readonly path: string
  readonly message: string
}
