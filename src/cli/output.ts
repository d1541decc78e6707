import { closeSync, openSync, renameSync, rmSync, writeSync } from 'node:fs'
import { basename, dirname, join } from 'node:path'
import { InputAtFault } from './failure'

/** Write every chunk to standard output. A reader that stops early (`| head`) is no failure. */
export function writeToStandardOutput(chunks: Iterable<string>): void {
  for (const chunk of chunks) {
    if (!writeWhole(1, chunk)) return
  }
}

/**
 * Write files whole or not at all: each goes to a temporary name beside its place first, and all are renamed only when
 * the last one is complete. Throws `InputAtFault` where a place cannot be written.
 */
export function writeFiles(files: readonly { readonly path: string; readonly chunks: Iterable<string> }[]): void {
  const temporary = files.map((file) => join(dirname(file.path), `.${basename(file.path)}.${process.pid}.part`))
  try {
    files.forEach((file, index) => {
      const descriptor = openSync(temporary[index]!, 'w')
      try {
        for (const chunk of file.chunks) writeWhole(descriptor, chunk)
      } finally {
        closeSync(descriptor)
      }
    })
    files.forEach((file, index) => {
      renameSync(temporary[index]!, file.path)
    })
  } catch (error) {
    for (const path of temporary) rmSync(path, { force: true })
    const code = (error as { code?: string }).code
    if (code === undefined) throw error
    throw new InputAtFault([{ path: '', message: `${files[0]!.path} cannot be written: ${REASONS[code] ?? code}` }])
  }
}

const REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'there is no such folder',
  ENOTDIR: 'what should be its folder is a file',
  EISDIR: 'it is a folder',
  EACCES: 'permission is denied',
  EROFS: 'it is on a disk that can only be read',
  ENOSPC: 'the disk is full'
}

/** Whether the whole chunk was taken; false where the reader has gone. */
function writeWhole(descriptor: number, chunk: string): boolean {
  const bytes = Buffer.from(chunk, 'utf8')
  let written = 0
  while (written < bytes.length) {
    try {
      written += writeSync(descriptor, bytes, written)
    } catch (error) {
      const code = (error as { code?: string }).code
      if (code === 'EPIPE') return false
      // A pipe that is full for the moment: try again.
      if (code !== 'EAGAIN') throw error
    }
  }
  return true
}
