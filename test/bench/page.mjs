// The benchmark of the page, on the built app: `npm run bench:page`.
import { createServer } from 'vite'

const server = await createServer({
  configFile: false,
  logLevel: 'error',
  appType: 'custom',
  server: { middlewareMode: true, watch: null, hmr: false, ws: false },
  optimizeDeps: { noDiscovery: true }
})
try {
  const { pageRedraw } = await server.ssrLoadModule('/test/bench/pageRedraw.ts')
  await pageRedraw()
} finally {
  await server.close()
}
