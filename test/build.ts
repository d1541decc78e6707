import { execFileSync } from 'node:child_process'

/**
 * Build the app and the command in a child process with NODE_ENV=production: inside the test runner the development
 * build of the view library would be bundled. PHASEWISE_BUILT=1 says that dist/ is fresh.
 */
export function setup(): void {
  if (process.env.PHASEWISE_BUILT === '1') return
  execFileSync('npm', ['run', '--silent', 'build'], {
    env: { ...process.env, NODE_ENV: 'production' },
    stdio: ['ignore', 'ignore', 'inherit']
  })
}
