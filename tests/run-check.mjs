// npm run check: the whole truth, on a fresh clone of a fresh machine too. Installs what it needs, runs every check even where
// an earlier one failed, and closes with the plain line 'N passed, N failed'. Plain Node, since nothing is installed yet.
import { spawnSync } from 'node:child_process'
import { existsSync, mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'

const started = Date.now()
const work = mkdtempSync(path.join(tmpdir(), 'ringside-check-'))
// NODE_ENV=production would leave the development packages out of the installation.
const environment = { ...process.env, NODE_ENV: undefined, NEXT_TELEMETRY_DISABLED: '1', FORCE_COLOR: '0' }
let passed = 0
let failed = 0
let skipped = 0

function say(line) {
  console.log(`\n== ${line} (${Math.round((Date.now() - started) / 1000)} s)`)
}

function run(command, args, options = {}) {
  return spawnSync(command, args, { stdio: 'inherit', env: environment, ...options }).status === 0
}

function works(command, args) {
  return spawnSync(command, args, { stdio: 'ignore' }).status === 0
}

/** A step without tests of its own counts as one. */
function step(name, command, args) {
  say(name)
  const good = run(command, args)
  if (good) passed++
  else failed++
  return good
}

function vitest(name, projects) {
  say(name)
  const report = path.join(work, `${projects.join('-')}.json`)
  const args = ['vitest', 'run', ...projects.flatMap((project) => ['--project', project])]
  const good = run('npx', [...args, '--reporter=default', '--reporter=json', `--outputFile.json=${report}`])
  const counts = existsSync(report) ? JSON.parse(readFileSync(report, 'utf8')) : null
  passed += counts?.numPassedTests ?? 0
  skipped += (counts?.numPendingTests ?? 0) + (counts?.numTodoTests ?? 0)
  // A file that could not be loaded has no test that failed, and no report at all is a failure.
  failed += Math.max(counts?.numFailedTests ?? 0, good ? 0 : 1)
}

function installPackages() {
  const lock = 'package-lock.json'
  const installed = 'node_modules/.package-lock.json'
  if (existsSync(installed) && statSync(installed).mtimeMs >= statSync(lock).mtimeMs) return
  say('Installing the packages of package-lock.json')
  if (!run('npm', ['ci', '--no-audit', '--no-fund'])) {
    console.log('The packages could not be installed, so nothing was checked.\n\n0 passed, 1 failed')
    process.exit(1)
  }
}

/** The programs that conformance and browser tests stand on, with the Debian package that brings each. */
const TOOLS = [
  ['chromium', () => existsSync('/usr/bin/chromium')],
  ['python3-astropy', () => works('/usr/bin/python3', ['-c', 'import astropy'])],
  ['python3-pyvo', () => works('/usr/bin/python3', ['-c', 'import pyvo'])],
  ['stilts', () => works('stilts', ['-version'])],
  ['libxml2-utils', () => works('xmllint', ['--version'])],
  ['fitsverify', () => existsSync('/usr/bin/fitsverify')],
]

function installTools() {
  const missing = TOOLS.filter(([, present]) => !present()).map(([name]) => name)
  if (missing.length === 0) return
  say(`Installing ${missing.join(', ')}`)
  const permitted = process.getuid?.() === 0 && works('apt-get', ['--version'])
  const apt = { env: { ...environment, DEBIAN_FRONTEND: 'noninteractive' } }
  if (permitted) {
    run('apt-get', ['update', '-qq'], { ...apt, stdio: ['ignore', 'ignore', 'inherit'] })
    run('apt-get', ['install', '-y', '-qq', '--no-install-recommends', ...missing], {
      ...apt,
      stdio: ['ignore', 'ignore', 'inherit'],
    })
  }
  const still = TOOLS.filter(([, present]) => !present()).map(([name]) => name)
  if (still.length) {
    console.log(
      `MISSING: ${still.join(', ')}. Tests that need them will fail; as root: apt-get install ${still.join(' ')}`,
    )
  }
}

installPackages()
installTools()
step('Lint', 'npm', ['run', '--silent', 'lint'])
step('Types', 'npm', ['run', '--silent', 'types'])
step('Workers', 'npm', ['run', '--silent', 'workers'])
vitest('Unit and component tests', ['unit', 'component'])
vitest('Conformance with stilts, xmllint and astropy', ['conformance'])
if (step('Build', 'npm', ['run', '--silent', 'build'])) vitest('Browser tests', ['e2e'])
else failed++

rmSync(work, { recursive: true, force: true })
say('Done')
if (skipped) console.log(`${skipped} tests were skipped: each needs a program that is missing here (see above).`)
console.log(`\n${passed} passed, ${failed} failed`)
process.exit(failed ? 1 : 0)
