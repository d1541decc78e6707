import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { resolve } from 'node:path'
import { type Browser, type BrowserContext, type BrowserContextOptions, chromium, type Page } from 'playwright-core'
import sirv from 'sirv'

/** Quiet, and alone: nothing of the browser's own goes to the network. */
const FLAGS = [
  '--headless=shell',
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync'
]

/**
 * A real browser that comes with the packages: CHROME_BIN, else the packaged one, else what is installed.
 * The packaged one unpacks its libraries only where it believes to run as a function, and into TMPDIR, whatever its
 * version: hence the variable, and a folder named after the version. The variables that it sets for itself are passed on.
 */
export async function launchBrowser(): Promise<Browser> {
  const environment = { ...process.env, LANG: 'en_US.UTF-8' }
  if (process.env.CHROME_BIN) {
    return chromium.launch({ executablePath: process.env.CHROME_BIN, args: FLAGS, env: environment })
  }
  if (process.platform === 'linux' && process.arch === 'x64') {
    const folder = resolve(`node_modules/.cache/chromium-${packagedVersion()}`)
    mkdirSync(folder, { recursive: true })
    process.env.AWS_LAMBDA_JS_RUNTIME = 'nodejs20.x'
    process.env.FONTCONFIG_FILE = fontConfiguration(folder)
    const before = process.env.TMPDIR
    process.env.TMPDIR = folder
    const { default: packaged } = await import('@sparticuz/chromium')
    const executablePath = await packaged.executablePath()
    const libraries = process.env.LD_LIBRARY_PATH
    if (before === undefined) delete process.env.TMPDIR
    else process.env.TMPDIR = before
    return chromium.launch({
      executablePath,
      args: FLAGS,
      env: { ...environment, ...(libraries === undefined ? {} : { LD_LIBRARY_PATH: libraries }) }
    })
  }
  if (existsSync('/usr/bin/chromium')) return chromium.launch({ executablePath: '/usr/bin/chromium', args: FLAGS })
  return chromium
    .launch({ channel: 'chrome', args: FLAGS })
    .catch(() => chromium.launch({ channel: 'msedge', args: FLAGS }))
}

/** The package's own font list looks for its fonts in /tmp only; without any font a page shows no text at all. */
function fontConfiguration(folder: string): string {
  const file = `${folder}/phasewise-fonts.conf`
  writeFileSync(
    file,
    `<?xml version="1.0"?><!DOCTYPE fontconfig SYSTEM "fonts.dtd"><fontconfig><dir>${folder}/fonts</dir>` +
      `<dir>/usr/share/fonts</dir><cachedir>${folder}/fonts-cache</cachedir></fontconfig>`
  )
  return file
}

function packagedVersion(): string {
  return JSON.parse(readFileSync('node_modules/@sparticuz/chromium/package.json', 'utf8')).version
}

/** The built app on a loopback address. */
export async function serveApp(folder = 'dist/app'): Promise<{ address: string; close: () => Promise<void> }> {
  const files = sirv(resolve(folder))
  const server: Server = createServer((request, response) => files(request, response))
  await new Promise<void>((done) => server.listen(0, '127.0.0.1', done))
  const { port } = server.address() as AddressInfo
  return {
    address: `http://127.0.0.1:${port}/`,
    close: () =>
      new Promise((done) => {
        server.closeAllConnections()
        server.close(() => done())
      })
  }
}

/** A page, and everything that went wrong on it: errors, broken policy, requests to elsewhere. */
export interface WatchedPage {
  readonly page: Page
  readonly context: BrowserContext
  readonly faults: string[]
}

export async function openPage(
  browser: Browser,
  address: string,
  options: BrowserContextOptions = {}
): Promise<WatchedPage> {
  const context = await browser.newContext({
    locale: 'en-GB',
    viewport: { width: 1440, height: 900 },
    acceptDownloads: true,
    ...options
  })
  const page = await context.newPage()
  const faults: string[] = []
  page.on('console', (message) => {
    if (message.type() === 'error' || message.type() === 'warning') faults.push(`console: ${message.text()}`)
  })
  page.on('pageerror', (error) => faults.push(`error: ${error.message}`))
  page.on('requestfailed', (request) => faults.push(`request failed: ${request.url()}`))
  page.on('request', (request) => {
    const url = request.url()
    if (!url.startsWith(address) && !url.startsWith(`blob:${address}`)) faults.push(`request to elsewhere: ${url}`)
  })
  await page.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', (event) => {
      console.error(`policy: ${event.violatedDirective} ${event.blockedURI}`)
    })
  })
  await page.goto(address)
  return { page, context, faults }
}
