import { describe, expect, it } from 'vitest'
import { isPlain, PLAIN_LIGHT, settingsFrom } from './light-settings'
import { BLACK_SCALE, sigmaFigure, SOFTENING_SCALE, STEPS, WEIGHT_SCALE, WHITE_SCALE } from './slider-scales'

describe('settings out of a browser’s storage', () => {
  it('come back as they were', () => {
    const settings = {
      views: { colour: { black: -0.4, white: 41, softening: null } },
      curve: 'log' as const,
      weights: { g: 1.5 },
      invert: true,
    }
    expect(settingsFrom(JSON.parse(JSON.stringify(settings)))).toEqual(settings)
  })

  it.each([
    ['nothing', null],
    ['text', 'black'],
    ['an unknown curve and odd views', { curve: 'cube', views: 7, weights: null, invert: 'yes' }],
    ['numbers that are none', { views: { deep: { black: '0', white: 1e300, softening: 0 } }, weights: { g: -1 } }],
  ])('that hold %s are the recipe’s own', (_, stored) => {
    expect(isPlain(settingsFrom(stored))).toBe(true)
  })

  it('are plain only while nothing is set', () => {
    expect(isPlain(PLAIN_LIGHT)).toBe(true)
    expect(isPlain({ ...PLAIN_LIGHT, invert: true })).toBe(false)
    expect(isPlain({ ...PLAIN_LIGHT, weights: { g: 1 } })).toBe(true)
    expect(isPlain({ ...PLAIN_LIGHT, weights: { g: 0 } })).toBe(false)
    expect(isPlain({ ...PLAIN_LIGHT, views: { band: { black: 0, white: null, softening: null } } })).toBe(false)
  })
})

describe('a slider', () => {
  it.each([
    ['black', BLACK_SCALE],
    ['white', WHITE_SCALE],
    ['softening', SOFTENING_SCALE],
    ['weight', WEIGHT_SCALE],
  ])('of %s rises from end to end and finds each place again', (_, scale) => {
    for (let place = 0; place < STEPS; place++) {
      expect(scale.value(place + 1)).toBeGreaterThan(scale.value(place))
      expect(scale.place(scale.value(place))).toBe(place)
    }
    expect(scale.place(1e9)).toBe(STEPS)
    expect(scale.place(-1e9)).toBe(0)
  })

  it('says its figure as people write it', () => {
    expect([-0.42, -0.01, 9, 41.3, 1234].map(sigmaFigure)).toEqual(['−0.4σ', '0.0σ', '9.0σ', '41σ', '1,234σ'])
  })
})
