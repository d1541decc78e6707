/** The part of the reference implementation of UCUM that the tests use; the package brings no types. */
declare module '@lhncbc/ucum-lhc' {
  export const UcumLhcUtils: {
    getInstance(): {
      validateUnitString(code: string): { status: 'valid' | 'invalid' | 'error' }
      convertUnitTo(
        from: string,
        value: number,
        to: string,
        options?: { molecularWeight?: number }
      ): { status: 'succeeded' | 'failed' | 'error'; toVal: number | null; msg: string[] }
    }
  }
}
