import type { Issue } from '../../pk/issue'
import { formatPath, type Step } from '../path'

/** Files nest a dozen levels; anything much deeper is not one of ours, and could exhaust the stack. */
const DEEPEST = 100

const NUMBER = /-?(?:0|[1-9][0-9]*)(?:\.[0-9]+)?(?:[eE][+-]?[0-9]+)?/y
const BLANKS = /[ \t\n\r]*/y
const LONE_SURROGATE = /[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/

/** A JSON text read: its value where the text is JSON, and everything that is wrong with it. */
export interface JsonReading {
  /** Absent where the text is not JSON. */
  readonly value?: unknown
  readonly issues: readonly Issue[]
}

/**
 * Read a JSON text (RFC 8259) strictly. Beyond the grammar, a duplicate key, a key `__proto__`, half of a surrogate pair
 * and a number beyond the range of a double are refused, each with its path; what is not JSON with its line and column.
 * An own reader, because `JSON.parse` keeps the last of two equal keys silently and words its errors differently
 * from engine to engine.
 */
export function readJson(text: string): JsonReading {
  const reader = new Reader(text)
  try {
    return { value: reader.document(), issues: reader.issues }
  } catch (error) {
    if (!(error instanceof NotJson)) throw error
    const { line, column } = position(text, error.offset)
    return {
      issues: [...reader.issues, { path: '', message: `not JSON: line ${line}, column ${column}: ${error.message}` }]
    }
  }
}

class NotJson extends Error {
  readonly offset: number
  constructor(offset: number, message: string) {
    super(message)
    this.offset = offset
  }
}

function position(text: string, offset: number): { line: number; column: number } {
  const before = text.slice(0, offset)
  const lineStart = before.lastIndexOf('\n') + 1
  return { line: before.split('\n').length, column: offset - lineStart + 1 }
}

class Reader {
  readonly issues: Issue[] = []
  readonly #text: string
  readonly #path: Step[] = []
  #at = 0

  constructor(text: string) {
    this.#text = text
  }

  document(): unknown {
    this.#skipBlanks()
    if (this.#at === this.#text.length) throw new NotJson(this.#at, 'the file is empty')
    const value = this.#value()
    if (this.#at < this.#text.length) throw new NotJson(this.#at, `unexpected ${this.#found()} after the end`)
    return value
  }

  /** A value and the blanks after it. */
  #value(): unknown {
    if (this.#path.length > DEEPEST) throw new NotJson(this.#at, `nested deeper than ${DEEPEST} levels`)
    const value = this.#bareValue()
    this.#skipBlanks()
    return value
  }

  #bareValue(): unknown {
    switch (this.#text[this.#at]) {
      case '{':
        return this.#object()
      case '[':
        return this.#list()
      case '"':
        return this.#string()
      case 't':
        return this.#word('true', true)
      case 'f':
        return this.#word('false', false)
      case 'n':
        return this.#word('null', null)
      default:
        return this.#number()
    }
  }

  #object(): unknown {
    const entries = new Map<string, unknown>()
    this.#open()
    if (this.#takes('}')) return {}
    do {
      if (this.#text[this.#at] !== '"')
        throw new NotJson(this.#at, `expected a key in double quotes, found ${this.#found()}`)
      const key = this.#string()
      this.#skipBlanks()
      this.#path.push(key)
      if (entries.has(key)) this.#issue(`duplicate key "${key}"; keep one of them`)
      if (key === '__proto__') this.#issue('the key "__proto__" is not allowed')
      this.#expect(':')
      const value = this.#value()
      if (key !== '__proto__') entries.set(key, value)
      this.#path.pop()
    } while (this.#takes(','))
    this.#expect('}', 'a comma or a closing brace')
    return Object.fromEntries(entries)
  }

  #list(): unknown[] {
    const items: unknown[] = []
    this.#open()
    if (this.#takes(']')) return items
    do {
      this.#path.push(items.length)
      items.push(this.#value())
      this.#path.pop()
    } while (this.#takes(','))
    this.#expect(']', 'a comma or a closing bracket')
    return items
  }

  #string(): string {
    const start = this.#at
    let end = start + 1
    while (this.#text[end] !== '"') {
      const code = this.#text.charCodeAt(end)
      if (Number.isNaN(code)) throw new NotJson(start, 'a text in double quotes is not closed')
      if (code < 0x20) throw new NotJson(end, 'a line break or control character stands inside a text')
      end += this.#text[end] === '\\' ? 2 : 1
    }
    this.#at = end + 1
    try {
      const value: unknown = JSON.parse(this.#text.slice(start, this.#at))
      const text = String(value)
      if (LONE_SURROGATE.test(text)) this.#issue('a text holds half of a surrogate pair, which is no character')
      return text
    } catch {
      throw new NotJson(start, 'a text holds an escape that is not JSON')
    }
  }

  #number(): number {
    NUMBER.lastIndex = this.#at
    const literal = NUMBER.exec(this.#text)?.[0]
    if (literal === undefined) throw new NotJson(this.#at, `expected a value, found ${this.#found()}`)
    this.#at += literal.length
    const value = Number(literal)
    if (!Number.isFinite(value)) this.#issue(`${literal} is too large for a number; numbers must be finite`)
    return value
  }

  #word<T>(word: string, value: T): T {
    if (!this.#text.startsWith(word, this.#at)) throw new NotJson(this.#at, `expected a value, found ${this.#found()}`)
    this.#at += word.length
    return value
  }

  #open(): void {
    this.#at += 1
    this.#skipBlanks()
  }

  #takes(character: string): boolean {
    if (this.#text[this.#at] !== character) return false
    this.#open()
    return true
  }

  #expect(character: string, expected = `"${character}"`): void {
    if (this.#text[this.#at] !== character) throw new NotJson(this.#at, `expected ${expected}, found ${this.#found()}`)
    this.#at += 1
    this.#skipBlanks()
  }

  #skipBlanks(): void {
    BLANKS.lastIndex = this.#at
    this.#at += BLANKS.exec(this.#text)?.[0].length ?? 0
  }

  #found(): string {
    const word = /[A-Za-z_+-][A-Za-z0-9_+-]{0,19}|./suy
    word.lastIndex = this.#at
    const found = word.exec(this.#text)?.[0]
    return found === undefined ? 'the end of the file' : JSON.stringify(found)
  }

  #issue(message: string): void {
    this.issues.push({ path: formatPath(this.#path), message })
  }
}
