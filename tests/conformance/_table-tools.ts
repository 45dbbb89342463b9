/**
 * The outside tools that judge our tables: stilts votlint, xmllint with the schema, and Debian's astropy.
 * A tool that is missing fails the test with one line; RINGSIDE_SKIP_CONFORMANCE=1 skips instead.
 */
import { execFileSync } from 'node:child_process'
import { describe } from 'vitest'

export const describeConformance = describe.skipIf(process.env.RINGSIDE_SKIP_CONFORMANCE === '1')

/** Debian's Python, which is the one that python3-astropy belongs to. */
const PYTHON = '/usr/bin/python3'

interface ToolResult {
  /** standard output and standard error together */
  output: string
  succeeded: boolean
}

/** What votlint says. Its exit status is 0 even with errors: only an empty answer is a good one. */
export function votlint(path: string): string {
  return run('stilts', ['votlint', 'votable=' + path], 'stilts').output
}

const OWN_SCHEMA = new URL('../../fixtures/vosi/ConeSearch-v1.0.xsd', import.meta.url).pathname

/** What stilts finds wrong with an XML document against IVOA's schemas, which it carries; empty where nothing is. */
export function xsdFaults(path: string): string {
  const schema = `schemaloc=http://www.ivoa.net/xml/ConeSearch/v1.0=${OWN_SCHEMA}`
  const { output, succeeded } = run('stilts', ['xsdvalidate', 'uselocals=true', schema, `doc=${path}`], 'stilts')
  return succeeded ? '' : output || 'stilts xsdvalidate failed'
}

/** Whether the file is valid against the VOTable 1.4 schema that astropy ships. */
export function validateAgainstSchema(path: string): ToolResult {
  const where =
    'import os, astropy.io.votable as v; print(os.path.join(os.path.dirname(v.__file__), "data", "VOTable.v1.4.xsd"))'
  const schema = python(['-c', where]).trim()
  return run('xmllint', ['--noout', '--schema', schema, path], 'libxml2-utils')
}

/** Runs one of the scripts beside this file and parses the JSON that it prints. */
export function askAstropy<Answer>(script: 'read-votable.py' | 'read-csv.py', ...paths: string[]): Answer {
  return JSON.parse(python([new URL(script, import.meta.url).pathname, ...paths])) as Answer
}

function python(argv: string[]): string {
  const { output, succeeded } = run(PYTHON, argv, 'python3-astropy')
  if (/No module named '?(astropy|numpy)/.test(output)) throw missing('astropy', 'python3-astropy')
  if (!succeeded) throw new Error(`${PYTHON} ${argv[0]} failed: ${output}`)
  return output
}

function run(command: string, argv: string[], debianPackage: string): ToolResult {
  try {
    const output = execFileSync(command, argv, {
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'pipe'],
      maxBuffer: 64 * 1024 * 1024,
    })
    return { output, succeeded: true }
  } catch (error) {
    const failure = error as NodeJS.ErrnoException & { stdout?: string; stderr?: string }
    if (failure.code === 'ENOENT') throw missing(command, debianPackage)
    return { output: `${failure.stdout ?? ''}${failure.stderr ?? ''}`, succeeded: false }
  }
}

function missing(tool: string, debianPackage: string): Error {
  return new Error(
    `${tool} is missing (Debian: apt-get install ${debianPackage}); RINGSIDE_SKIP_CONFORMANCE=1 skips these tests.`,
  )
}
