/** Cones over a release of a million entries, as the server answers them, with the plan by which SQLite finds them. */
import { execFile } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { againstAim } from './_aim'
import type { ConeRun } from './_cone-run'

const AIM_MS = 50

export async function benchConeSearch(entries = 1_000_000): Promise<string[]> {
  const script = fileURLToPath(new URL('./_cone-run.ts', import.meta.url))
  const { stdout } = await promisify(execFile)(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', script, String(entries)],
    { maxBuffer: 2 ** 24 },
  )
  const run = JSON.parse(stdout) as ConeRun
  const name = `cone-search, ${run.entries.toLocaleString('en')} entries`
  return [
    `${name}: filled in ${run.fillSeconds.toFixed(0)} s; ${run.rssMb} MB at the end`,
    ...run.kinds.map(({ what, times, cpu, bytes }) => {
      const figures = (sorted: number[]) =>
        `median ${at(sorted, 0.5).toFixed(1)}, p99 ${at(sorted, 0.99).toFixed(1)} ms`
      const aim = againstAim(at(times, 0.99), AIM_MS, 'ms')
      return `${name}: ${what}, ${(bytes / 1024).toFixed(0)} KiB: ${figures(times)}; of the processor ${figures(cpu)}; ${aim}`
    }),
    ...run.plan.map((line) => `    ${line}`),
  ]
}

/** Of sorted times. */
const at = (times: readonly number[], share: number) =>
  times[Math.min(times.length - 1, Math.floor(times.length * share))]
