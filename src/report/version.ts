/** The program's version, as in package.json; it is part of what makes a table reproducible. */
export const PROGRAM_VERSION = '0.1.0'
