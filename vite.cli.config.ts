import { defineConfig } from 'vite'

/** The command line: one self-contained file for Node. */
export default defineConfig({
  publicDir: false,
  ssr: { noExternal: true },
  build: {
    ssr: 'src/cli/main.ts',
    outDir: 'dist/cli',
    emptyOutDir: true,
    target: 'node20',
    rolldownOptions: {
      output: { entryFileNames: 'phasewise.mjs', banner: '#!/usr/bin/env node' }
    }
  }
})
