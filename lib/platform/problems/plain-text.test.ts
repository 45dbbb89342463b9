import { describe, expect, it } from 'vitest'
import { plainText } from './plain-text'

const remark = plainText('The remark')

describe('plainText', () => {
  it('keeps what people write, in any script, with line feeds for line ends', () => {
    expect(remark.parse('  =1+1, "x"\r\n<b>&amp; ∆ 弧 🌌\rend ')).toBe('=1+1, "x"\n<b>&amp; ∆ 弧 🌌\nend')
    expect(remark.parse('a\tb')).toBe('a\tb')
  })

  it.each(['x\u0000y', 'bell \u0007', '\u001b[31mred', 'del\u007f'])('refuses %j by what it is', (text) => {
    expect(remark.safeParse(text).error?.issues[0].message).toMatch(
      /^The remark holds a character that cannot be shown/,
    )
  })
})
