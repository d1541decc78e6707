import { z } from 'zod'

// biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is refused.
const CONTROL = /[\u0000-\u001f\u007f]/

const onOneLine = (longest: number) =>
  z
    .string()
    .min(1)
    .max(longest)
    .refine((text) => !CONTROL.test(text) && text.trim() === text, {
      message: 'must not hold control characters, nor begin or end with a blank'
    })

/** A name by which other parts of a file refer to something. */
export const name = onOneLine(200)

/** A heading. */
export const title = onOneLine(500)

/** Text for people. */
export const prose = z.string().min(1).max(10_000)

/** A share, more than 0 and at most 1. */
export const share = z.number().gt(0).max(1)
