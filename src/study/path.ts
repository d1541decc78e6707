/** One step into a file: a key of an object or a position in a list. */
export type Step = string | number

const PLAIN_KEY = /^[A-Za-z_$][A-Za-z0-9_$]*$/

/** A place in a file as people write it: `regimens[0].doses[1].amount`; a key that is no plain word is quoted. */
export function formatPath(steps: readonly Step[]): string {
  return steps.reduce<string>((path, step) => below(path, step), '')
}

/** The path of a key or position below a path. */
export function below(path: string, step: Step): string {
  if (typeof step === 'number') return `${path}[${step}]`
  if (!PLAIN_KEY.test(step)) return `${path}[${JSON.stringify(step)}]`
  return path === '' ? step : `${path}.${step}`
}
