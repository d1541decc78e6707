import type { Issue } from '../pk/issue'
import { below, type Step } from './path'

/**
 * The problems found in one file so far, and which parts of it have the wrong shape.
 * Checks of meaning go on in the parts that are sound, so that everything wrong is listed at once.
 */
export class Problems {
  readonly #issues = new Map<string, Issue>()
  readonly #malformed = new Set<string>()
  /** Every ancestor of a malformed place. */
  readonly #holdingMalformed = new Set<string>()

  get issues(): readonly Issue[] {
    return [...this.#issues.values()]
  }

  /** What stands in the file is quoted in messages; each stays on one line of reasonable length all the same. */
  add(path: string, message: string): void {
    const issue = { path: oneLine(path), message: oneLine(message) }
    this.#issues.set(`${issue.path}\n${issue.message}`, issue)
  }

  /** Note that the value at this place does not have the shape of its type, and say why. */
  addMalformed(steps: readonly Step[], message: string): void {
    let path = ''
    for (const step of steps) {
      this.#holdingMalformed.add(path)
      path = below(path, step)
    }
    this.#malformed.add(path)
    this.add(path, message)
  }

  /** Whether the value at the path and everything in it has its type's shape (unknown keys aside). */
  isSound(path: string): boolean {
    return this.isOpen(path) && !this.#holdingMalformed.has(path)
  }

  /** Whether the value at the path itself has its type's shape, so that it can be walked into. */
  isOpen(path: string): boolean {
    if (this.#malformed.has('')) return false
    for (let end = 1; end <= path.length; end++) {
      const atStep = end === path.length || path[end] === '.' || path[end] === '['
      if (atStep && this.#malformed.has(path.slice(0, end))) return false
    }
    return true
  }
}

const LONGEST = 600

function oneLine(text: string): string {
  // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is taken out.
  const line = text.replaceAll(/[\u0000-\u001f\u007f-\u009f\u2028\u2029]/g, (character) => {
    return `\\u${character.charCodeAt(0).toString(16).padStart(4, '0')}`
  })
  return line.length > LONGEST ? `${line.slice(0, LONGEST - 3)}...` : line
}
