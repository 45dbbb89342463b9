/**
 * The tables of candidates and of the catalogue at 100,000 rows: the processor time of a page for every order and every filter, by role;
 * the slowest with the plan by which SQLite finds it.
 */
import { execFile } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { againstAim } from './_aim'
import type { TablesRun, TimedTable } from './_tables-run'

const AIM_MS = 50
const SHOWN = 8

export async function benchTables(candidates = 100_000): Promise<string[]> {
  const script = fileURLToPath(new URL('./_tables-run.ts', import.meta.url))
  const { stdout } = await promisify(execFile)(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', script, String(candidates)],
    { maxBuffer: 2 ** 24 },
  )
  const run = JSON.parse(stdout) as TablesRun
  const name = `tables, ${run.candidates.toLocaleString('en')} rows`
  const above = run.tables.filter((table) => median(table) >= AIM_MS)
  const all = run.tables.flatMap(({ times }) => times).sort((a, b) => a - b)
  return [
    `${name}: ${run.tables.length} orders and filters of three roles, filled in ${run.fillSeconds.toFixed(0)} s`,
    `${name}: all pages median ${at(all, 0.5).toFixed(1)}, p95 ${at(all, 0.95).toFixed(1)}, p99 ${at(all, 0.99).toFixed(1)} ms of the processor`,
    `${name}: slowest by its median ${median(run.tables[0]).toFixed(1)} ms, ${above.length} of ${run.tables.length} above; ` +
      againstAim(median(run.tables[0]), AIM_MS, 'ms'),
    ...run.tables
      .slice(0, Math.max(SHOWN, above.length))
      .map((table) => `    ${median(table).toFixed(1)} ms, ${table.found.toLocaleString('en')} rows: ${table.what}`),
    `${name}: plans of the slowest`,
    ...run.slowest.plans.map((plan) => `    ${plan}`),
    `${name}: leaving out a person whose grades are in ${Math.round((run.candidates * 2) / 25).toLocaleString('en')} entries, ${run.leaveOutMs.toFixed(0)} ms`,
  ]
}

/** Of sorted times. */
const at = (times: readonly number[], share: number) =>
  times[Math.min(times.length - 1, Math.floor(times.length * share))]
const median = ({ times }: TimedTable) => at(times, 0.5)
