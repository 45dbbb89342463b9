import SQLite from 'better-sqlite3'
import { expect, it, vi } from 'vitest'
import { keepStatements } from './kept-statements'

const open = () => {
  const sqlite = new SQLite(':memory:')
  sqlite.exec("create table place (id integer primary key, name text); insert into place values (1, 'creek')")
  return { sqlite, prepare: vi.spyOn(sqlite, 'prepare'), kept: keepStatements(sqlite) }
}

it('compiles a statement once, however often it is run, with other values each time', () => {
  const { kept, prepare } = open()
  const names = [1, 2, 1].map((id) => kept.prepare('select name from place where id = ?').all([id]))
  expect(names).toEqual([[{ name: 'creek' }], [], [{ name: 'creek' }]])
  expect(prepare).toHaveBeenCalledTimes(1)
})

it('compiles a pragma each time, which is when it does its work', () => {
  const { kept, prepare, sqlite } = open()
  for (const set of [0, 1, 0]) {
    kept.prepare(`pragma foreign_keys = ${set}`).run([])
    expect(sqlite.pragma('foreign_keys', { simple: true })).toBe(set)
  }
  expect(prepare).toHaveBeenCalledTimes(3)
})

it('gives the columns of a table as it is now, also after it changed', () => {
  const { kept } = open()
  const all = () => kept.prepare('select * from place').all([])
  expect(all()).toEqual([{ id: 1, name: 'creek' }])
  kept.prepare('alter table place add column tide text').run([])
  expect(all()).toEqual([{ id: 1, name: 'creek', tide: null }])
})

it('keeps no more than some hundred, the least recently used given up first, and no long lists', () => {
  const { kept, prepare } = open()
  const often = 'select 1'
  for (let n = 0; n < 500; n++) {
    kept.prepare(often)
    kept.prepare(`select ${n} as n`)
  }
  prepare.mockClear()
  kept.prepare(often)
  kept.prepare('select 499 as n')
  expect(prepare).not.toHaveBeenCalled()
  kept.prepare('select 0 as n')
  expect(prepare).toHaveBeenCalledTimes(1)
  const long = `select '${'x'.repeat(7000)}'`
  prepare.mockClear()
  kept.prepare(long)
  kept.prepare(long)
  expect(prepare).toHaveBeenCalledTimes(2)
})
