import { mkdir } from 'node:fs/promises'
import path from 'node:path'
import type { Page } from 'playwright-core'
import { expect } from 'vitest'
import { expectAccessible } from './_browser'

const SIZES = [
  { name: 'desk', width: 1440, height: 900 },
  { name: 'half', width: 720, height: 900 },
  { name: 'phone', width: 390, height: 844 },
]
const THEMES = ['night', 'day']

/** Pictures of every state go here, as `bench-asked-phone-day.png`; none are taken where it is not given. */
const PICTURES = process.env.RINGSIDE_PICTURES

/**
 * Looks at a state of a page on a desk, in half a window and on a phone, by night and by day: nothing reaches out of the window, and
 * axe finds nothing, by night on a desk and by day on a phone, or everywhere where pictures are taken. The page stays in its state, and comes back to the first size.
 */
export async function lookAt(page: Page, state: string): Promise<void> {
  for (const { name, width, height } of SIZES) {
    await page.setViewportSize({ width, height })
    for (const theme of THEMES) {
      await page.evaluate((wanted) => document.documentElement.setAttribute('data-theme', wanted), theme)
      await page.waitForTimeout(120)
      if (PICTURES) {
        await mkdir(PICTURES, { recursive: true })
        await page.screenshot({ path: path.join(PICTURES, `${state}-${name}-${theme}.png`) })
      }
      const out = await reachingOut(page)
      expect(out, `${state} on ${name}, ${theme}`).toEqual([])
      // axe takes most of the time: each theme once, and everything where pictures are wanted.
      if (PICTURES || (name === 'desk' && theme === 'night') || (name === 'phone' && theme === 'day')) {
        await expectAccessible(page)
      }
    }
  }
  await page.setViewportSize(SIZES[0])
}

/** What is wider than the window, also where a box that hides it keeps the page from scrolling. What scrolls in itself may be. */
function reachingOut(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const found = [document.documentElement.scrollWidth > innerWidth ? 'the page scrolls sideways' : '']
    for (const element of document.querySelectorAll<HTMLElement>('body *')) {
      const { left, right, width, height } = element.getBoundingClientRect()
      if (width <= 1 || height <= 1 || (right <= innerWidth + 1 && left >= -1)) continue
      if (!element.checkVisibility({ opacityProperty: true, visibilityProperty: true })) continue
      let around = element.parentElement
      while (around && !/auto|scroll/.test(getComputedStyle(around).overflowX)) around = around.parentElement
      // A picture that has been drawn closer is cut off by its frame.
      if (around || element.closest('figure, svg')) continue
      found.push(`${element.outerHTML.slice(0, 120)} from ${Math.round(left)} to ${Math.round(right)}`)
    }
    return found.filter(Boolean).slice(0, 4)
  })
}
