// Bundle every benchmark of this folder as the program itself is bundled, and run them one after another.
// `node test/bench/run.mjs exponential` runs those whose name begins so.
import { mkdirSync, readdirSync } from 'node:fs'
import { basename, join } from 'node:path'
import { fileURLToPath, pathToFileURL } from 'node:url'
import { build } from 'vite'

const here = fileURLToPath(new URL('.', import.meta.url))
const out = join(here, '../../node_modules/.cache/bench')
mkdirSync(out, { recursive: true })

const wanted = process.argv[2] ?? ''
for (const file of readdirSync(here).sort()) {
  if (!file.endsWith('.bench.ts') || !file.startsWith(wanted)) continue
  const name = `${basename(file, '.ts')}.mjs`
  await build({
    configFile: false,
    logLevel: 'error',
    publicDir: false,
    ssr: { noExternal: true },
    build: {
      ssr: join(here, file),
      outDir: out,
      emptyOutDir: false,
      target: 'node20',
      rolldownOptions: { output: { entryFileNames: name } }
    }
  })
  await import(pathToFileURL(join(out, name)).href)
}
