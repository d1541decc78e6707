import { readFileSync, statSync } from 'node:fs'
import { InputAtFault } from './failure'

/** Largest file that is read at all: the reader refuses anything over 20 MB; this keeps a slip from filling the memory. */
const TOO_LARGE_TO_LOAD = 64e6

/** The bytes of a file, or of standard input for `-`. Throws `InputAtFault` where they cannot be had. */
export function readInput(path: string): Uint8Array {
  try {
    if (path !== '-' && statSync(path).size > TOO_LARGE_TO_LOAD) {
      throw new InputAtFault([{ path: '', message: `${path} is larger than 20 MB, the largest file that is read` }])
    }
    return readFileSync(path === '-' ? 0 : path)
  } catch (error) {
    if (error instanceof InputAtFault) throw error
    throw new InputAtFault([{ path: '', message: `${path} cannot be read: ${reason(error)}` }])
  }
}

function reason(error: unknown): string {
  const code = (error as { code?: string }).code
  if (code === 'ENOENT') return 'there is no such file'
  if (code === 'EISDIR') return 'it is a folder'
  if (code === 'EACCES') return 'permission is denied'
  return code ?? String(error)
}
