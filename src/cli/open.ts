import { spawn } from 'node:child_process'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { fileURLToPath } from 'node:url'
import sirv from 'sirv'
import { InputAtFault } from './failure'
import { readInput } from './input'
import { studyOf } from './studyFile'

/** Where the page asks for the study that it was opened with; the query tells it to. */
const OPENED_STUDY = '/opened-study.json'

/** `phasewise open [STUDY]`: serve the app on the loopback address until interrupted, and start a browser on it. */
export async function open(
  path: string | undefined,
  options: { readonly port: string; readonly browser: boolean }
): Promise<void> {
  const port = Number(options.port)
  if (!Number.isInteger(port) || port < 0 || port > 65_535) {
    throw new InputAtFault([{ path: '--port', message: `must be a whole number from 0 to 65535, got ${options.port}` }])
  }
  const study = path === undefined ? undefined : readInput(path)
  // A file that cannot be read as a study is said here, before a browser is started.
  if (study !== undefined) studyOf(study)
  const files = sirv(fileURLToPath(new URL('../app', import.meta.url)), { etag: true })
  const server = createServer((request, response) => {
    if (study !== undefined && request.url === OPENED_STUDY) {
      response.writeHead(200, { 'content-type': 'application/json', 'cache-control': 'no-store' }).end(study)
      return
    }
    files(request, response, () => {
      response.writeHead(404).end()
    })
  })
  const taken = await new Promise<NodeJS.ErrnoException | undefined>((done) => {
    server.once('error', done)
    server.listen(port, '127.0.0.1', () => done(undefined))
  })
  if (taken !== undefined) {
    throw new InputAtFault([{ path: '--port', message: `port ${port} cannot be used: ${taken.code}` }])
  }
  const address = `http://127.0.0.1:${(server.address() as AddressInfo).port}/${study === undefined ? '' : '?opened'}`
  process.stdout.write(`Phasewise is at ${address} (Ctrl-C ends it)\n`)
  if (options.browser) startBrowser(address)
}

/** The platform's own way to show an address; the address was printed, so a desktop without one loses nothing. */
function startBrowser(address: string): void {
  const [command, ...args] =
    process.platform === 'darwin'
      ? ['open', address]
      : process.platform === 'win32'
        ? ['cmd', '/c', 'start', '', address]
        : ['xdg-open', address]
  const child = spawn(command!, args, { stdio: 'ignore', detached: true })
  child.once('error', () => undefined)
  child.unref()
}
