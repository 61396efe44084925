import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { textWidth, wrapText } from '../../../src/figures/scene/text-width.ts'

describe('textWidth', () => {
  it('adds the advances of a Helvetica-like face', () => {
    // Advances of the standard Type 1 face Helvetica, thousandths: H 722, i 222, digits 556 each.
    expect(textWidth('Hi', 1000)).toBe(944)
    expect(textWidth('0123456789', 10)).toBeCloseTo(55.6, 9)
    expect(textWidth('', 10)).toBe(0)
    expect(textWidth('\u8a08', 10)).toBe(10)
  })
})

describe('wrapText', () => {
  it('keeps every word in order and no line wider than asked unless one word is', () => {
    fc.assert(
      fc.property(
        fc.array(fc.string({ minLength: 1, maxLength: 12 }), { maxLength: 40 }),
        fc.integer({ min: 20, max: 200 }),
        (words, width) => {
          const text = words.join(' ')
          const lines = wrapText(text, 7, width)
          expect(lines.join(' ')).toBe(text.split(/\s+/).filter(Boolean).join(' '))
          for (const line of lines)
            if (line.includes(' ')) expect(textWidth(line, 7)).toBeLessThanOrEqual(width)
        },
      ),
      { seed: 131, numRuns: 300 },
    )
  })

  it('gives no line for no text', () => {
    expect(wrapText('  ', 7, 100)).toEqual([])
  })
})
