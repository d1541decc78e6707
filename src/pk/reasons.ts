/** Why a value is not defined, in words, under the value's own name. A name that is not here has its value. */
export type Reasons = Readonly<Record<string, string>>

/** A number, or in words why there is none. */
export type NumberOrReason = number | string

/** The numbers of a group, undefined where there is a reason instead. */
export function numbersOf<Name extends string>(
  group: Readonly<Record<Name, NumberOrReason>>
): Readonly<Record<Name, number | undefined>>
export function numbersOf(group: Readonly<Record<string, NumberOrReason>>): Record<string, number | undefined> {
  return Object.fromEntries(
    Object.entries(group).map(([name, value]) => [name, typeof value === 'number' ? value : undefined])
  )
}

/** The reasons of a group, under the names of what is not defined. */
export function reasonsOf(group: Readonly<Record<string, NumberOrReason>>): Reasons {
  return Object.fromEntries(
    Object.entries(group).flatMap(([name, value]) => (typeof value === 'string' ? [[name, value]] : []))
  )
}
