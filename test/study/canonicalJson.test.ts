import { createHash } from 'node:crypto'
import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { canonicalJson } from '../../src/study/canonicalJson'
import { contentHash } from '../../src/study/hash'

/** The double with these bits, in hexadecimal. */
function double(bits: string): number {
  const view = new DataView(new ArrayBuffer(8))
  view.setBigUint64(0, BigInt(`0x${bits}`))
  return view.getFloat64(0)
}

// RFC 8785, section 3.2 and appendix B; written down from memory of the standard.
describe('the canonical form of RFC 8785', () => {
  test('writes the example of section 3.2.2', () => {
    const value: unknown = JSON.parse(
      '{"numbers":[333333333.33333329,1E30,4.50,2e-3,0.000000000000000000000000001],"string":"\\u20ac$\\u000F\\u000aA\'\\u0042\\u0022\\u005c\\\\\\"\\/","literals":[null,true,false]}'
    )
    expect(canonicalJson(value)).toBe(
      '{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}'
    )
  })

  test('sorts keys by UTF-16 code units, as the example of section 3.2.3', () => {
    const value = {
      '\u20ac': 'Euro Sign',
      '\r': 'Carriage Return',
      '\ufb33': 'Hebrew Letter Dalet With Dagesh',
      '1': 'One',
      '\ud83d\ude00': 'Emoji: Grinning Face',
      '\u0080': 'Control',
      '\u00f6': 'Latin Small Letter O With Diaeresis'
    }
    const order = [...canonicalJson(value).matchAll(/:"([^"]+)"/g)].map(([, text]) => text)
    expect(order).toEqual([
      'Carriage Return',
      'One',
      'Control',
      'Latin Small Letter O With Diaeresis',
      'Euro Sign',
      'Emoji: Grinning Face',
      'Hebrew Letter Dalet With Dagesh'
    ])
  })

  test.each([
    ['0000000000000000', '0'],
    ['8000000000000000', '0'],
    ['0000000000000001', '5e-324'],
    ['8000000000000001', '-5e-324'],
    ['7fefffffffffffff', '1.7976931348623157e+308'],
    ['4340000000000000', '9007199254740992'],
    ['4430000000000000', '295147905179352830000'],
    ['44b52d02c7e14af5', '9.999999999999997e+22'],
    ['44b52d02c7e14af6', '1e+23'],
    ['44b52d02c7e14af7', '1.0000000000000001e+23'],
    ['444b1ae4d6e2ef4e', '999999999999999700000'],
    ['444b1ae4d6e2ef50', '1e+21'],
    ['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'],
    ['3eb0c6f7a0b5ed8d', '0.000001'],
    ['41b3de4355555555', '333333333.3333333'],
    ['becbf647612f3696', '-0.0000033333333333333333'],
    ['43143ff3c1cb0959', '1424953923781206.2']
  ])('writes the double %s as %s', (bits, text) => expect(canonicalJson(double(bits))).toBe(text))

  test('refuses what has no canonical form', () => {
    for (const value of [Number.NaN, Number.POSITIVE_INFINITY, '\ud800', { '\udc00': 1 }, undefined]) {
      expect(() => canonicalJson(value)).toThrow(RangeError)
    }
    expect(canonicalJson('\ud83d\ude00 \\ud800')).toBe('"\ud83d\ude00 \\\\ud800"')
  })

  test('is the same whatever the order of keys and the blanks, and reads back as the same value', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.string(), fc.jsonValue()), (value) => {
        const turned = Object.fromEntries(Object.entries(value).reverse())
        expect(canonicalJson(turned)).toBe(canonicalJson(value))
        expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)))
      }),
      { seed: 20262 }
    )
  })
})

describe('the hash of a file', () => {
  test('is SHA-256 of the canonical form, as another implementation computes it', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (value) => {
        const other = createHash('sha256').update(canonicalJson(value), 'utf8').digest('hex')
        expect(contentHash(value)).toBe(other)
      }),
      { seed: 20263 }
    )
  })

  test('of the text "" is that of two quotation marks', () => {
    // printf '""' | sha256sum (GNU coreutils)
    expect(contentHash('')).toBe('12ae32cb1ec02d01eda3581b127c1fee3b0dc53572ed6baf239721a03d82e126')
  })
})
