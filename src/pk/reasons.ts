/** Why a value is not defined, in words, under the value's own name. A name that is not here has its value. */
export type Reasons = Readonly<Record<string, string>>
