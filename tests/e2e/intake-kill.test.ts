// Intake through the real server, killed in the middle of what it does: nothing is lost and nothing doubled.
import { existsSync, readdirSync } from 'node:fs'
import path from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { packZip } from '../_support/archives'
import { smallSearch } from '../_support/survey-files'
import { SurveyRun } from '../_support/survey-run'
import { intakeResult } from '../_support/survey-site'
import { makeDataFolder, removeDataFolder } from './_server'

const folders: string[] = []
async function newRun(): Promise<SurveyRun> {
  const folder = await makeDataFolder()
  folders.push(folder)
  const run = new SurveyRun(folder)
  await run.begin()
  return run
}
afterAll(async () => {
  for (const folder of folders) await removeDataFolder(folder)
})

// 300 cutouts of 100 candidates: 60 in an archive, 240 one by one.
const files = smallSearch(100)
const archive = {
  name: 'first.zip',
  bytes: () => packZip(files.slice(0, 60).map(({ name, bytes }) => ({ name, bytes: bytes() }))),
}
const loose = files.slice(60)

describe('300 files and an archive', () => {
  it('come to the same counts, hashes and stamps through four kills as undisturbed', async () => {
    const calm = await newRun()
    await calm.send([archive])
    await calm.send(loose)
    await calm.settle()
    await calm.end()

    const rough = await newRun()
    let killing: Promise<void> = Promise.resolve()
    const kill = () => void (killing = killing.then(() => rough.kill()))
    await rough.send([archive], kill)
    await rough.send(loose, () => {
      if (rough.acknowledged === 90 || rough.acknowledged === 210) kill()
    })
    await killing
    // Once more while it reads, with nothing left to be sent.
    let again = false
    await rough.settle(async ({ imaged }) => {
      if (again || imaged < 60) return
      again = true
      await rough.kill()
    })
    await rough.end()

    const [expected, result] = [await intakeResult(calm.dataFolder), await intakeResult(rough.dataFolder)]
    expect(rough.kills).toBeGreaterThanOrEqual(3)
    expect(expected.imaged).toBe(100)
    expect(expected.files).toHaveLength(301)
    expect(expected.planes).toHaveLength(300)
    expect(expected.files.filter(({ fate }) => fate !== 'imaged').map(({ name }) => name)).toEqual(['first.zip'])
    expect(result).toEqual(expected)
    for (const { sha256 } of result.stamps) {
      expect(stampNames(rough.dataFolder).has(sha256), 'every stamp is on disk').toBe(true)
    }
  })
})

let names: Set<string> | null = null
function stampNames(dataFolder: string): Set<string> {
  if (names) return names
  const folder = path.join(dataFolder, 'stamps')
  expect(existsSync(folder)).toBe(true)
  const entries = readdirSync(folder, { recursive: true, withFileTypes: true })
  // A name may be a link to the file of its task: one that leads nowhere does not exist.
  const whole = entries.filter(({ parentPath, name }) => existsSync(path.join(parentPath, name)))
  names = new Set(whole.map(({ name }) => name))
  return names
}
