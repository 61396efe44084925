/** A piece of a formula: on the line (0), raised (1) or lowered (-1). */
export interface FormulaRun {
  readonly text: string
  readonly level: -1 | 0 | 1
}

/**
 * Plain-text formulas such as `t^−(α−1) exp(−t/τ)` or `t_m` in pieces. What follows `^` or `_` is raised or lowered up
 * to the next space, end of clause or closing bracket that was not opened inside. Without either the text is one piece.
 */
export function formulaRuns(text: string): FormulaRun[] {
  const runs: FormulaRun[] = []
  let plain = ''
  let at = 0
  while (at < text.length) {
    const one = text[at]
    if (one !== '^' && one !== '_') {
      plain += one
      at++
      continue
    }
    const end = endOfScript(text, at + 1)
    if (end === at + 1) {
      // A caret with nothing after it is a caret.
      plain += one
      at++
      continue
    }
    if (plain !== '') runs.push({ text: plain, level: 0 })
    plain = ''
    runs.push({ text: text.slice(at + 1, end), level: one === '^' ? 1 : -1 })
    at = end
  }
  if (plain !== '' || runs.length === 0) runs.push({ text: plain, level: 0 })
  return runs
}

function endOfScript(text: string, from: number): number {
  let depth = 0
  let at = from
  for (; at < text.length; at++) {
    const one = text[at]
    if (/[\s,;:^_]/.test(one)) break
    if (one === '.' && /^\.(\s|$)/.test(text.slice(at, at + 2))) break
    if (one === '(' || one === '[') depth++
    if ((one === ')' || one === ']') && --depth < 0) break
  }
  return at
}

/** Size and rise of a raised or lowered piece, in font sizes. */
export const SCRIPT_RISE = 0.34
const SCRIPT_SIZE = 0.76

/** Font size of raised and lowered pieces: print keeps them at 6 pt or more. */
export function scriptSize(size: number): number {
  return Math.max(SCRIPT_SIZE * size, Math.min(size, 6))
}
