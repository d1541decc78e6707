import type { Reasons } from '../pk/reasons'

/**
 * Values under the names of a document, `null` where one is not defined, and a `why` that gives the reason under the same
 * name. `names` maps the core's names to the document's. Throws `RangeError` for an undefined value without a reason:
 * nothing is left out in silence.
 */
export function withReasons<const Names extends Readonly<Record<string, string>>>(
  group: { readonly [Name in keyof Names]: unknown } & { readonly why: Reasons },
  names: Names
): Record<string, unknown> {
  const document: Record<string, unknown> = {}
  const why: Record<string, string> = {}
  for (const [name, shown] of Object.entries(names)) {
    const value = group[name]
    document[shown] = value ?? null
    if (value !== undefined) continue
    const reason = group.why[name]
    if (reason === undefined) throw new RangeError(`${name} is not defined and nothing says why`)
    why[shown] = reason
  }
  return { ...document, why }
}
