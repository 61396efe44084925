import { describe, expect, it } from 'vitest'
import { LAWS } from '../../../src/core/laws/all-laws.ts'
import { formulaRuns, scriptSize } from '../../../src/figures/scene/formula-runs.ts'

const shown = (text: string): string =>
  formulaRuns(text)
    .map(({ text: part, level }) => (level === 0 ? part : `${level > 0 ? '↑' : '↓'}{${part}}`))
    .join('')

describe('formulaRuns', () => {
  it.each([
    ['P(t) ∝ t^−α', 'P(t) ∝ t↑{−α}'],
    ['S(t) ∝ t^−(α−1) exp(−t/τ)', 'S(t) ∝ t↑{−(α−1)} exp(−t/τ)'],
    ['exp[−(t/τ)^β]', 'exp[−(t/τ)↑{β}]'],
    ['(ln(t/t_m))²', '(ln(t/t↓{m}))²'],
    ['P(t) ∝ t^−α; more', 'P(t) ∝ t↑{−α}; more'],
    ['t^−α.', 't↑{−α}.'],
    ['t^−1.5 s', 't↑{−1.5} s'],
    ['no scripts', 'no scripts'],
    ['', ''],
    ['a ^ b', 'a ^ b'],
    ['x^', 'x^'],
    ['x_i^2', 'x↓{i}↑{2}'],
  ])('reads %j', (text, expected) => {
    expect(shown(text)).toBe(expected)
  })

  it('keeps every character of the formulas of all laws but the signs themselves, brackets closed in each piece', () => {
    for (const { formula } of Object.values(LAWS)) {
      const runs = formulaRuns(formula)
      expect(runs.map(({ text }) => text).join('')).toBe(formula.replace(/[\^_]/g, ''))
      for (const { text, level } of runs) {
        if (level !== 0) expect(text.split('(').length).toBe(text.split(')').length)
      }
    }
  })
})

describe('scriptSize', () => {
  it('is smaller than the text, in print never below 6', () => {
    expect(scriptSize(12)).toBeLessThan(10)
    expect(scriptSize(7)).toBe(6)
    expect(scriptSize(5)).toBe(5)
  })
})
