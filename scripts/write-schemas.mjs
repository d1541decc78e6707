/** Writes public/schemas/*.json from the schemas that the program reads files with; a test compares them. */
import { mkdirSync, writeFileSync } from 'node:fs'
import { runnerImport } from 'vite'

const { module } = await runnerImport('./src/study/file/jsonSchemas.ts', { configFile: false })
mkdirSync('public/schemas', { recursive: true })
for (const [file, text] of Object.entries(module.jsonSchemas())) {
  writeFileSync(`public/schemas/${file}`, text)
  process.stdout.write(`public/schemas/${file}\n`)
}
