// The README's first command after the build: makes the demo night where it is absent or of another version, then does
// the whole job on it. Status 1 of `night` is its expected answer here: the night holds planted troubles.
import { spawnSync } from 'node:child_process'
import { existsSync, readFileSync, rmSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const at = (path) => fileURLToPath(new URL(`../${path}`, import.meta.url))
const darkline = (...words) => spawnSync(process.execPath, [at('dist/cli/main.js'), ...words], { stdio: 'inherit', cwd: at('.') }).status

const { DEMO_STAMP, demoStamp } = await import(new URL('../dist/src/demo/demoNight.js', import.meta.url).href)
const stamp = at(`samples/night/${DEMO_STAMP}`)
if (!existsSync(stamp) || readFileSync(stamp, 'utf8') !== demoStamp({ clean: false })) {
  rmSync(at('samples/night'), { recursive: true, force: true })
  if (darkline('demo', 'samples/night', '--quiet') !== 0) process.exit(2)
}
const status = darkline('night', 'samples/night', '--targets', 'samples/night/targets.csv', '--out', 'reports/night')
process.exit(status === 1 ? 0 : (status ?? 2) || 3)
