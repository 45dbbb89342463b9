import { readFileSync } from 'node:fs'
import { expect, it } from 'vitest'

it('gives a reader without script whose system is light the same day as everybody else', () => {
  const css = readFileSync(new URL('globals.css', import.meta.url), 'utf8')
  const valuesOf = (start: string) => {
    const from = css.indexOf('{', css.indexOf(start)) + 1
    return css
      .slice(from, css.indexOf('}', from))
      .trim()
      .split(/\s*\n\s*/)
  }
  const day = valuesOf(":root[data-theme='day']")
  expect(day.length).toBeGreaterThan(15)
  const [, ...without] = css.split('@media (scripting: none) and (prefers-color-scheme: light)')
  expect(without).toHaveLength(1)
  const inside = without[0].slice(without[0].indexOf(':root {') + 7)
  expect(
    inside
      .slice(0, inside.indexOf('}'))
      .trim()
      .split(/\s*\n\s*/),
  ).toEqual(day)
})
