/**
 * The scripts that a user would write instead, which speed is measured against. Their folder is given by the environment
 * variable RINGSIDE_PEERS; without it the comparison is skipped and said so. They run on Debian's Python with astropy and scipy,
 * or on that of RINGSIDE_PYTHON.
 */
import { spawnSync } from 'node:child_process'
import path from 'node:path'

const PYTHON = process.env.RINGSIDE_PYTHON ?? '/usr/bin/python3'

/** What the script prints, or a sentence on why it could not be asked. */
export function askPeer(script: string, ...argv: string[]): { answer: string } | { skipped: string } {
  const folder = process.env.RINGSIDE_PEERS
  if (!folder)
    return { skipped: `skipped beside ${script}: RINGSIDE_PEERS does not name the folder of the peer scripts` }
  return runPython(script, [path.join(folder, script), ...argv])
}

/** Runs a line of Python for what the peer script does not print. */
export function askPython(code: string, ...argv: string[]): { answer: string } | { skipped: string } {
  return runPython('Python', ['-c', code, ...argv])
}

function runPython(name: string, argv: string[]): { answer: string } | { skipped: string } {
  const { status, stdout, stderr, error } = spawnSync(PYTHON, argv, { encoding: 'utf8', maxBuffer: 2 ** 26 })
  if (status === 0) return { answer: stdout.trim() }
  const why = error?.message ?? stderr.trim().split('\n').at(-1)
  return { skipped: `skipped beside ${name}: ${why} (Debian: apt-get install python3-astropy python3-scipy)` }
}

/** '12.3 s', '45 ms' */
export function duration(milliseconds: number): string {
  return milliseconds >= 10000 ? `${(milliseconds / 1000).toFixed(1)} s` : `${Math.round(milliseconds)} ms`
}
