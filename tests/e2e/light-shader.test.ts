/** The shader of Light against the same formula in JavaScript, in Chromium with WebGL2 drawn by SwiftShader. */
import { build } from 'esbuild'
import { chromium, type Browser, type Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'

let browser: Browser
let page: Page

/** Runs in the page: draws one sheet both ways and gives the largest difference and how many counts are white. */
const COMPARE = `
import { drawSheet } from '@/lib/science/imaging/draw-sheet'
import { makeSheetShader } from '@/components/light/sheet-shader'

const shader = makeSheetShader()
globalThis.hasShader = shader !== null
globalThis.compare = (colour, options) => {
  const width = 67
  const height = 41
  const channel = (k) =>
    Float32Array.from({ length: width * height }, (_, i) => {
      // Noise round 0 in the lower half, light from far below the sky to 1e5 sigma in the upper.
      const noise = 3 * Math.sin(12.9898 * i + 78.233 * k) * Math.cos(4.1 * i)
      return i < 1300 ? noise : noise + Math.sign(Math.sin(i / 3)) * 10 ** ((6 * (i % width)) / width - 1)
    })
  const red = channel(1)
  const sheet = { width, height, colour, red, green: colour ? channel(2) : red, blue: colour ? channel(3) : red,
    missing: Uint8Array.from(red, (_, i) => (i % 97 === 0 ? 1 : 0)), blackSigma: 0, whiteSigma: 1, softeningSigma: 1 }
  const plain = new Uint8ClampedArray(4 * width * height)
  drawSheet(sheet, options, plain)
  const canvas = document.createElement('canvas')
  canvas.width = width
  canvas.height = height
  const context = canvas.getContext('2d')
  context.drawImage(shader.draw(sheet, options), 0, 0)
  const drawn = context.getImageData(0, 0, width, height).data
  let worst = 0
  for (let i = 0; i < plain.length; i++) worst = Math.max(worst, Math.abs(plain[i] - drawn[i]))
  return { worst, levels: new Set(drawn).size }
}`

beforeAll(async () => {
  const bundle = await build({
    stdin: { contents: COMPARE, resolveDir: process.cwd(), loader: 'ts' },
    bundle: true,
    write: false,
    format: 'iife',
  })
  browser = await chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: ['--no-sandbox', '--use-gl=angle', '--use-angle=swiftshader', '--enable-unsafe-swiftshader'],
  })
  page = await browser.newPage()
  await page.addScriptTag({ content: bundle.outputFiles[0].text })
})
afterAll(() => browser?.close())

describe('the shader', () => {
  it('is there: Chromium has WebGL2', async () => {
    expect(await page.evaluate('hasShader')).toBe(true)
  })

  const limits = [
    { blackSigma: -1, whiteSigma: 40, softeningSigma: 6 },
    { blackSigma: -10, whiteSigma: 30_000, softeningSigma: 0.2 },
    { blackSigma: 2, whiteSigma: 1, softeningSigma: 300 },
  ]
  const cases = [true, false].flatMap((colour) =>
    ['asinh', 'log', 'sqrt', 'linear'].flatMap((curve) =>
      limits.flatMap((limit) => [false, true].map((invert) => ({ colour, options: { ...limit, curve, invert } }))),
    ),
  )
  it.each(cases)('agrees within two counts: $colour $options', async ({ colour, options }) => {
    const found = await page.evaluate(`compare(${colour}, ${JSON.stringify(options)})`)
    const { worst, levels } = found as { worst: number; levels: number }
    expect(worst).toBeLessThanOrEqual(2)
    expect(levels).toBeGreaterThan(2)
  })
})
