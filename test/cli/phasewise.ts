import { spawnSync } from 'node:child_process'

export interface Ran {
  readonly status: number | null
  readonly out: string
  readonly error: string
}

/** Run the built command as a child process. `input` goes to its standard input. */
export function phasewise(args: readonly string[], input?: string | Uint8Array): Ran {
  const run = spawnSync(process.execPath, ['dist/cli/phasewise.mjs', ...args], {
    ...(input === undefined ? {} : { input }),
    maxBuffer: 1 << 30
  })
  return { status: run.status, out: run.stdout.toString('utf8'), error: run.stderr.toString('utf8') }
}
