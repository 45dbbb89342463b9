import AxeBuilder from '@axe-core/playwright'
import { chromium, type Browser, type Page } from 'playwright-core'
import { expect } from 'vitest'

/** Debian's Chromium, without its looks outside. */
export function launchBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  })
}

/** WCAG 2.2 AA as far as axe can see it. */
export async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'])
    .analyze()
  const found = violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 200)).join(' | ')}`)
  expect(found, `axe on ${page.url()}`).toEqual([])
}

/** Fails a test on whatever a page throws or logs as an error. */
export function collectErrors(page: Page): string[] {
  const errors: string[] = []
  page.on('pageerror', (error) => errors.push(String(error)))
  page.on('console', (message) => {
    if (message.type() === 'error') errors.push(`${message.text()} (${page.url()})`)
  })
  return errors
}
