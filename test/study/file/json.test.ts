import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { readJson } from '../../../src/study/file/json'

describe('JSON reading', () => {
  test('gives what JSON.parse gives, for any JSON without a key "__proto__"', () => {
    fc.assert(
      fc.property(fc.jsonValue({ noUnicodeString: false }), fc.constantFrom(undefined, 2, '\t'), (value, indent) => {
        const text = JSON.stringify(value, null, indent)
        if (text.includes('__proto__') || /\\ud[89a-f]/.test(text)) return
        const reading = readJson(text)
        expect(reading.issues).toEqual([])
        expect(reading.value).toEqual(JSON.parse(text))
      }),
      { seed: 20260 }
    )
  })

  test('refuses what JSON.parse refuses, and never throws', () => {
    const characters = [...'{}[]",:0123456789.eE+-\\utrfalsn \n\u0000é']
    fc.assert(
      fc.property(fc.string({ unit: fc.constantFrom(...characters), maxLength: 40 }), (text) => {
        const reading = readJson(text)
        let parsed = true
        try {
          JSON.parse(text)
        } catch {
          parsed = false
        }
        expect('value' in reading, JSON.stringify(text)).toBe(parsed)
      }),
      { seed: 20261, numRuns: 3000 }
    )
  })

  // Cases of RFC 8259 that readers get wrong.
  test.each([
    ['01', 'after the end'],
    ['1.', 'after the end'],
    ['.5', 'expected a value'],
    ['+1', 'expected a value'],
    ['[1,]', 'expected a value'],
    ['{"a":1,}', 'expected a key'],
    ["{'a':1}", 'expected a key'],
    ['{a:1}', 'expected a key'],
    ['"a', 'not closed'],
    ['"a\n"', 'control character'],
    ['"\\x41"', 'escape that is not JSON'],
    ['nul', 'expected a value'],
    ['// comment\n1', 'expected a value'],
    ['1 2', 'after the end'],
    ['', 'the file is empty'],
    [' \n ', 'the file is empty'],
    ['[1', 'a comma or a closing bracket, found the end of the file'],
    ['{"a" 1}', 'expected ":"']
  ])('refuses %j', (text, words) => {
    const reading = readJson(text)
    expect('value' in reading).toBe(false)
    expect(reading.issues.at(-1)?.message).toContain(words)
  })

  test('names line and column of what is not JSON', () => {
    expect(readJson('{\r\n  "a": [1, 2,\n    three]\n}').issues[0]?.message).toBe(
      'not JSON: line 3, column 5: expected a value, found "three"'
    )
  })

  test('finds duplicate keys with their path, also where one is written with an escape', () => {
    expect(readJson('{"a":{"b":[{"c":1,"c":2}]},"a":1,"\\u0061":2}').issues).toEqual([
      { path: 'a.b[0].c', message: 'duplicate key "c"; keep one of them' },
      { path: 'a', message: 'duplicate key "a"; keep one of them' },
      { path: 'a', message: 'duplicate key "a"; keep one of them' }
    ])
  })

  test('does not let a file reach the prototype of its objects', () => {
    const reading = readJson('{"__proto__":{"polluted":true},"constructor":1}')
    expect(reading.issues).toEqual([{ path: '__proto__', message: 'the key "__proto__" is not allowed' }])
    expect((reading.value as { polluted?: unknown }).polluted).toBeUndefined()
    expect(Object.hasOwn(reading.value as object, 'constructor')).toBe(true)
  })

  test('refuses numbers beyond a double and halves of surrogate pairs', () => {
    expect(readJson('[1e309]').issues[0]).toEqual({
      path: '[0]',
      message: '1e309 is too large for a number; numbers must be finite'
    })
    expect(readJson('"\\ud800"').issues[0]?.message).toMatch(/surrogate/)
    expect(readJson('"\\ud83d\\ude00"').issues).toEqual([])
  })

  test('refuses nesting that would exhaust the stack', () => {
    const reading = readJson('['.repeat(100_000))
    expect(reading.issues[0]?.message).toMatch(/nested deeper than 100 levels/)
  })
})
