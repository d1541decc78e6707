import { fileURLToPath } from 'node:url'
import { defineConfig, type Plugin } from 'vite'
import solid from 'vite-plugin-solid'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))

/** Nothing from elsewhere, nothing inline, nothing sent away: the page talks to its own files alone. */
const CONTENT_SECURITY_POLICY = [
  "default-src 'none'",
  "script-src 'self'",
  "style-src 'self'",
  "img-src 'self'",
  "font-src 'self'",
  "connect-src 'self'",
  "worker-src 'self'",
  "manifest-src 'self'",
  "base-uri 'none'",
  "form-action 'none'"
].join('; ')

/** The policy is set by the build: the development server injects scripts of its own and would not run under it. */
const contentSecurityPolicy: Plugin = {
  name: 'content-security-policy',
  apply: 'build',
  transformIndexHtml: () => [
    {
      tag: 'meta',
      attrs: { 'http-equiv': 'Content-Security-Policy', content: CONTENT_SECURITY_POLICY },
      injectTo: 'head-prepend'
    }
  ]
}

/** The app: one page and its worker, as static files that any host can serve from any folder. */
export default defineConfig({
  root: here('src/app'),
  base: './',
  publicDir: here('public'),
  plugins: [solid(), contentSecurityPolicy],
  worker: { format: 'es' },
  server: { host: '127.0.0.1' },
  preview: { host: '127.0.0.1' },
  build: {
    outDir: here('dist/app'),
    emptyOutDir: true,
    target: 'es2022',
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    rolldownOptions: { checks: { pluginTimings: false } }
  }
})
