import { Command } from 'commander'
import { PROGRAM_VERSION } from '../report/version'
import { check } from './check'
import { exposure } from './exposure'
import { InputAtFault } from './failure'
import { open } from './open'
import { phases } from './phases'
import { table } from './table'

const program = new Command('phasewise')
  .description('Compartment-model dosing workbench: concentration, exposure and phases of a study file.')
  .version(PROGRAM_VERSION)
  .exitOverride()
  .showSuggestionAfterError()

verb('table', 'the concentration table').action(table)
verb('exposure', 'exposure per regimen, interval, day and steady state, and each target').action(exposure)
verb('phases', 'rate matrix, half-lives, shares and when distribution is over').action(phases)
program
  .command('check')
  .description("validate a study or model file, run the model's own checks, compare two methods")
  .argument('<file>', 'study or model file, or - for standard input')
  .option('--json', 'one JSON document')
  .option('--out <file>', 'write to a file, whole or not at all')
  .action(check)
program
  .command('open')
  .description('serve the app on the loopback address with this study open')
  .argument('[study]', 'study file, or - for standard input; the demonstration study where absent')
  .option('--port <number>', 'port on the loopback address', '0')
  .option('--no-browser', 'print the address and start no browser')
  .action(open)

await run()

function verb(name: string, description: string): Command {
  return program
    .command(name)
    .description(description)
    .argument('<study>', 'study file, or - for standard input')
    .option('--json', 'one JSON document')
    .option('--out <file>', 'write to a file, whole or not at all; with its metadata beside a CSV')
}

/** Exit status 0 done, 1 the input is at fault (a line a problem, no stack trace), 2 the program is at fault. */
async function run(): Promise<void> {
  try {
    await program.parseAsync()
  } catch (error) {
    if (error instanceof InputAtFault) {
      process.stderr.write(`${error.message}\n`)
      process.exitCode = 1
    } else if (isUsage(error)) {
      // commander has printed what is wrong, or the help that was asked for.
      process.exitCode = error.exitCode === 0 ? 0 : 1
    } else {
      process.stderr.write(
        `phasewise ${PROGRAM_VERSION} failed: ${error instanceof Error ? error.message : String(error)}\n`
      )
      process.stderr.write('This is a fault of the program, not of the file. No result was written.\n')
      process.exitCode = 2
    }
  }
}

function isUsage(error: unknown): error is { readonly exitCode: number } {
  return error instanceof Error && 'code' in error && String(error.code).startsWith('commander.')
}
