import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { escapeXml, unescapeXml } from '../../../src/figures/scene/xml-text.ts'
import { hostileText } from '../../session/any-session.ts'

/** Characters of XML 1.0, section 2.2. */
function isXmlCharacter(code: number): boolean {
  return (
    code === 0x9 ||
    code === 0xa ||
    code === 0xd ||
    (code >= 0x20 && code <= 0xd7ff) ||
    (code >= 0xe000 && code <= 0xfffd) ||
    (code >= 0x10000 && code <= 0x10ffff)
  )
}

describe('escapeXml', () => {
  it('leaves no markup and no character that XML forbids', () => {
    fc.assert(
      fc.property(hostileText, (text) => {
        const escaped = escapeXml(text)
        expect(escaped).not.toMatch(/[<>"']|&(?!(amp|lt|gt|quot|#39);)/)
        expect(Array.from(escaped).every((one) => isXmlCharacter(one.codePointAt(0) ?? 0))).toBe(true)
      }),
      { seed: 101, numRuns: 1000 },
    )
  })

  it('is undone for every text of XML characters, entities in it too', () => {
    fc.assert(
      fc.property(hostileText, (text) => {
        const legal = Array.from(text)
          .filter((one) => isXmlCharacter(one.codePointAt(0) ?? 0))
          .join('')
        expect(unescapeXml(escapeXml(legal))).toBe(legal)
      }),
      { seed: 102, numRuns: 1000 },
    )
    for (const text of ['&amp;lt;', '&#39;', '&amp;amp;', '&lt;b&gt;'])
      expect(unescapeXml(escapeXml(text))).toBe(text)
  })

  it('puts U+FFFD for what XML forbids', () => {
    expect(escapeXml('a\u0000b\u000bc\uffffd\ud800e')).toBe('a\ufffdb\ufffdc\ufffdd\ufffde')
  })
})
