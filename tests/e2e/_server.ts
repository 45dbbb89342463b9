import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtemp, rm } from 'node:fs/promises'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import path from 'node:path'

/** The real server (`next start` on the build) with a data folder of its own, on loopback. */
export interface TestServer {
  url: string
  dataFolder: string
  /** Everything that it printed so far. */
  output(): string
  stop(): Promise<void>
  /** SIGKILL: no goodbye. */
  kill(): Promise<void>
  pid: number
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer()
    probe.once('error', reject)
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address()
      probe.close(() => resolve(typeof address === 'object' && address ? address.port : 0))
    })
  })
}

async function untilHealthy(url: string, child: ChildProcess, output: () => string): Promise<void> {
  for (let tries = 0; tries < 240; tries++) {
    if (child.exitCode !== null) throw new Error(`The server ended with ${child.exitCode}:\n${output()}`)
    const answer = await fetch(`${url}/api/health`).catch(() => null)
    if (answer?.ok) return
    await new Promise((resolve) => setTimeout(resolve, 250))
  }
  throw new Error(`The server did not come up:\n${output()}`)
}

export async function makeDataFolder(): Promise<string> {
  return mkdtemp(path.join(tmpdir(), 'ringside-e2e-'))
}

/** @param samePort of a server that was killed, for browsers that have its pages open. */
export async function startTestServer(dataFolder: string, samePort?: number): Promise<TestServer> {
  const port = samePort ?? (await freePort())
  const url = `http://127.0.0.1:${port}`
  const child = spawn(
    process.execPath,
    ['node_modules/next/dist/bin/next', 'start', '-H', '127.0.0.1', '-p', String(port)],
    {
      stdio: ['ignore', 'pipe', 'pipe'],
      env: { ...process.env, NODE_ENV: 'production', RINGSIDE_DATA: dataFolder, NEXTAUTH_URL: url, PORT: String(port) },
    },
  )
  let printed = ''
  child.stdout.on('data', (chunk: Buffer) => (printed += chunk.toString()))
  child.stderr.on('data', (chunk: Buffer) => (printed += chunk.toString()))
  const output = () => printed
  await untilHealthy(url, child, output)
  return {
    url,
    dataFolder,
    output,
    pid: child.pid ?? 0,
    async kill() {
      const ended = new Promise((resolve) => child.once('exit', resolve))
      child.kill('SIGKILL')
      await ended
    },
    async stop() {
      const ended = new Promise((resolve) => child.once('exit', resolve))
      child.kill('SIGTERM')
      const forced = setTimeout(() => child.kill('SIGKILL'), 5000)
      await ended
      clearTimeout(forced)
    },
  }
}

export async function removeDataFolder(folder: string): Promise<void> {
  await rm(folder, { recursive: true, force: true })
}
