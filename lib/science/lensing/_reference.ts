/** The reference values of this room, fixtures/lensing and fixtures/cosmology. */
import { readFileSync } from 'node:fs'
import path from 'node:path'

export function readReference<Shape>(folder: 'lensing' | 'cosmology'): Shape {
  return JSON.parse(readFileSync(path.join(process.cwd(), 'fixtures', folder, `${folder}.json`), 'utf8')) as Shape
}

/** |value - expected| / |expected|, or |value| where 0 is expected. */
export function relativeError(value: number, expected: number): number {
  return expected === 0 ? Math.abs(value) : Math.abs(value / expected - 1)
}
