import { type Confirmation, worstOf } from '../study/confirmation'

/** What agreement of two methods does not prove; it stands wherever the agreement does. */
export const NOT_PROVED =
  'This says nothing about how well the model fits this patient; its typical prediction error is not part of this comparison.'

const HOW = {
  'second method': 'by a second method',
  'closed form': 'by its closed form',
  'finer tolerance': 'by the same method at a hundredth of its tolerance'
} as const

/** `the arithmetic is confirmed by a second method (3 in 10^10)`: the largest relative difference, rounded up. */
export function agreementInWords(confirmation: Confirmation): string {
  const difference = confirmation.largestRelativeDifference
  const how = HOW[confirmation.by]
  if (difference === 0) return `the arithmetic is confirmed ${how}, to the last digit`
  const exponent = Math.ceil(-Math.log10(difference) - 1e-12)
  const parts = Math.ceil(difference * 10 ** exponent)
  return `the arithmetic is confirmed ${how} (${parts} in 10^${exponent})`
}

/** The worst of the confirmations as a sentence, with where it stands and what it does not prove. */
export function confirmationSentence(confirmations: readonly Confirmation[]): string {
  const worst = worstOf(confirmations)
  if (worst === undefined) return `There is nothing to compare. ${NOT_PROVED}`
  const { at, regimen, massBalance } = worst
  return `Largest difference at ${at} h in "${regimen}": ${agreementInWords(worst)}; mass balance ${massBalance.toExponential(1)}. ${NOT_PROVED}`
}
