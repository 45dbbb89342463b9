import { describe, expect, it } from 'vitest'
import { commandOf } from './bench-keys'

const press = (key: string, more: Partial<Parameters<typeof commandOf>[0]> = {}) => ({
  key,
  code: '',
  repeat: false,
  ctrlKey: false,
  altKey: false,
  metaKey: false,
  shiftKey: false,
  isComposing: false,
  ...more,
})

describe('a key at the bench', () => {
  it('means what the person made it, also where tags are open', () => {
    expect(commandOf(press('f'), 'page', 'tags')).toEqual({ do: 'choose', index: 10 })
    expect(commandOf(press('f'), 'page', 'tags', { A: 'F' })).toEqual({ do: 'grade', letter: 'A' })
  })

  it.each(['A', 'B', 'C', 'N', 'U'])('%s grades, in either case', (letter) => {
    const grade = { do: 'grade', letter }
    expect(commandOf(press(letter.toLowerCase()), 'page', null)).toEqual(grade)
    expect(commandOf(press(letter), 'control', null)).toEqual(grade)
  })

  it('means nothing with a modifier, so that no shortcut of the browser grades', () => {
    for (const modifier of ['ctrlKey', 'altKey', 'metaKey', 'shiftKey']) {
      expect(commandOf(press('a', { [modifier]: true }), 'page', null)).toBeNull()
    }
    expect(commandOf(press('?', { shiftKey: true }), 'page', null)).toEqual({ do: 'help' })
  })

  it('means nothing while typing, while held down and while composing', () => {
    expect(commandOf(press('a'), 'text', null)).toBeNull()
    expect(commandOf(press('a', { repeat: true }), 'page', null)).toBeNull()
    expect(commandOf(press('a', { isComposing: true }), 'page', null)).toBeNull()
  })

  it('leaves Space and Enter to a focused button', () => {
    expect(commandOf(press(' '), 'control', null)).toBeNull()
    expect(commandOf(press('Enter'), 'control', 'tags')).toBeNull()
    expect(commandOf(press(' '), 'page', null)).toEqual({ do: 'blink' })
  })

  it('shows views by digit, also on layouts whose digits are shifted', () => {
    expect(commandOf(press('3'), 'page', null)).toEqual({ do: 'view', index: 2 })
    expect(commandOf(press('"', { code: 'Digit3' }), 'page', null)).toEqual({ do: 'view', index: 2 })
  })

  it('works Light, zoom and its way about, held down too where one goes on', () => {
    const light = (key: string, more = {}) => commandOf(press(key, more), 'page', null)
    expect(light('l')).toEqual({ do: 'light', light: 'toggle' })
    expect(light('0')).toEqual({ do: 'light', light: 'reset' })
    expect(light('i')).toEqual({ do: 'light', light: 'invert' })
    expect(light('+', { shiftKey: true, repeat: true })).toEqual({ do: 'light', light: 'closer' })
    expect(light('-', { repeat: true })).toEqual({ do: 'light', light: 'farther' })
    expect(light('ArrowLeft', { shiftKey: true })).toEqual({ do: 'light', light: 'left' })
    expect(light('ArrowLeft')).toEqual({ do: 'next view', step: -1 })
    for (const modifier of ['ctrlKey', 'altKey', 'metaKey']) expect(light('0', { [modifier]: true })).toBeNull()
    expect(light('i', { repeat: true })).toBeNull()
  })

  it('leaves its arrows to a focused slider, where letters still grade and digits still show views', () => {
    for (const key of ['ArrowLeft', 'ArrowUp', 'Home', 'PageDown']) {
      expect(commandOf(press(key), 'slider', null)).toBeNull()
    }
    expect(commandOf(press('a'), 'slider', null)).toEqual({ do: 'grade', letter: 'A' })
    expect(commandOf(press('2'), 'slider', null)).toEqual({ do: 'view', index: 1 })
    expect(commandOf(press('0'), 'slider', null)).toEqual({ do: 'light', light: 'reset' })
  })

  it('picks by digit while a chooser is open, where letters still grade', () => {
    expect(commandOf(press('1'), 'page', 'tags')).toEqual({ do: 'choose', index: 0 })
    expect(commandOf(press('0'), 'page', 'tags')).toEqual({ do: 'choose', index: 9 })
    expect(commandOf(press('f'), 'page', 'tags')).toEqual({ do: 'choose', index: 10 })
    expect(commandOf(press('n'), 'page', 'tags')).toEqual({ do: 'grade', letter: 'N' })
    expect(commandOf(press('Escape'), 'page', 'tags')).toEqual({ do: 'close' })
    expect(commandOf(press('f'), 'page', null)).toEqual({ do: 'light', light: 'field' })
  })
})
