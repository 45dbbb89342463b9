import { screen, waitFor, within } from '@testing-library/react'
import { describe, expect, it } from 'vitest'
import { freshRoom, grades, name, open } from './_bench-room'

freshRoom()

const help = () => screen.findByRole('dialog', { name: 'Keys at the bench' })
const settings = () => screen.findByRole('dialog', { name: 'Your keys' })
type User = Awaited<ReturnType<typeof open>>['user']

/** Gives an action another key through the sheet. */
async function change(user: User, action: RegExp, key: string): Promise<HTMLElement> {
  await user.keyboard(',')
  const sheet = await settings()
  await user.click(within(sheet).getByRole('button', { name: action }))
  await user.keyboard(key)
  return sheet
}

describe('the keys', () => {
  it('are listed in a dialog that opens by key, takes no grades and closes with Esc', async () => {
    const { user } = await open()
    await user.keyboard('h')
    expect(await help()).toContainElement(document.activeElement as HTMLElement)
    await user.keyboard('a')
    await user.keyboard('{Escape}')
    expect(screen.queryByRole('dialog')).not.toBeInTheDocument()
    expect(name()).toBe('SWS-1')
  })

  it('can be switched off, are then dead and shown nowhere, and stay so for this person after a reload', async () => {
    const { user, unmount } = await open()
    await user.keyboard('h')
    await help()
    await user.click(screen.getByRole('switch'))
    await user.keyboard('{Escape}')
    await user.keyboard('a')
    expect(name()).toBe('SWS-1')
    expect(document.querySelectorAll('kbd')).toHaveLength(0)
    unmount()
    const again = await open()
    await again.user.keyboard('a')
    expect(name()).toBe('SWS-1')
    await again.user.click(screen.getByRole('button', { name: /^A: Sure/ }))
    expect(name()).toBe('SWS-2')
  })

  it('can be changed by mouse from the help, work at once, are shown everywhere, and outlive a reload', async () => {
    const { user, unmount } = await open()
    await user.click(screen.getByRole('button', { name: /All keys/ }))
    await help()
    await user.click(screen.getByRole('button', { name: 'Change the keys' }))
    await settings()
    await user.click(screen.getByRole('button', { name: 'grade N, not a lens: N' }))
    await user.keyboard('j')
    await user.click(screen.getByRole('button', { name: 'Back to the bench' }))
    await user.keyboard('n')
    expect(name(), 'N has been given up').toBe('SWS-1')
    unmount()
    const again = await open()
    expect(screen.getByText('J', { selector: 'kbd' })).toBeInTheDocument()
    await again.user.keyboard('j')
    await waitFor(() => expect(grades()[0]?.body).toMatchObject({ grade: 'N' }))
    await again.user.keyboard('?')
    expect(within(await help()).getByText('J', { selector: 'kbd' })).toBeInTheDocument()
  })

  it('can be changed by keyboard alone, and Esc gives up the choice before it closes the sheet', async () => {
    const { user } = await open()
    await user.keyboard(',')
    await settings()
    for (let tabs = 0; !document.activeElement?.getAttribute('aria-label')?.startsWith('tags'); tabs++) {
      expect(tabs).toBeLessThan(40)
      await user.tab()
    }
    await user.keyboard('{Enter}')
    await user.keyboard('{Escape}')
    expect(screen.getByRole('dialog')).toBeInTheDocument()
    await user.keyboard('{Enter}q{Escape}')
    expect(screen.queryByRole('dialog')).not.toBeInTheDocument()
    await user.keyboard('q')
    expect(screen.getByRole('button', { name: /What do you see/ })).toHaveAttribute('aria-expanded', 'true')
  })

  it('are refused in words where another action has them, and nothing changes', async () => {
    const { user } = await open()
    const sheet = await change(user, /^tags: T/, 'a')
    expect(within(sheet).getByRole('alert')).toHaveTextContent('A is already the key for: grade A, sure.')
    await user.keyboard('{Escape}{Escape}')
    await user.keyboard('t')
    expect(screen.getByRole('button', { name: /What do you see/ })).toHaveAttribute('aria-expanded', 'true')
    expect(name()).toBe('SWS-1')
  })

  it('go back to how they come', async () => {
    const { user } = await open()
    await change(user, /^grade A, sure: A/, 'g')
    await user.click(screen.getByRole('button', { name: 'All keys as they come' }))
    await user.keyboard('{Escape}')
    await user.keyboard('a')
    expect(name()).toBe('SWS-2')
    expect(Object.keys(localStorage).filter((key) => key.includes('bench-keys'))).toEqual([])
  })

  it('blinks while a key of one’s own for it is held', async () => {
    const { user } = await open()
    await change(user, /^blink, held: X/, 'y')
    await user.keyboard('{Escape}2')
    const shown = () => document.querySelector('figure img[aria-hidden="false"]')?.getAttribute('alt')
    await user.keyboard('{y>}')
    expect(shown()).toBe('SWS-1, colour')
    await user.keyboard('{/y}')
    expect(shown()).toBe('SWS-1, deep')
  })
})
