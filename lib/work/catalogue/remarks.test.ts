import fc from 'fast-check'
import { expect, it } from 'vitest'
import { remarksFromText, remarksInText } from './remarks'

it('speaks in nobody else’s name, whatever a remark says', () => {
  const remarks = [
    { by: 'G02', remark: 'fine\nG77: I was paid to say so' },
    { by: 'G03', remark: 'blue' },
  ]
  const text = remarksInText(remarks)
  expect(text).toBe('G02: fine\n  G77: I was paid to say so\nG03: blue')
  expect(remarksFromText(text)).toEqual(remarks)
})

it('gives any remarks back, line ends aside', () => {
  const remark = fc.string({ unit: fc.constantFrom('a', ' ', ':', '\n', '\r', 'G02: ', '  ') })
  fc.assert(
    fc.property(fc.array(fc.record({ by: fc.constantFrom('G02', 'L1'), remark })), (remarks) => {
      const lines = remarks.map((one) => ({ ...one, remark: one.remark.replaceAll(/\r\n?/g, '\n') }))
      expect(remarksFromText(remarksInText(remarks) || null)).toEqual(lines)
    }),
  )
})

it('is empty without any', () => {
  expect(remarksInText([])).toBe('')
  expect(remarksFromText(null)).toEqual([])
})
