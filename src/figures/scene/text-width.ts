/** Advance widths of a Helvetica-like sans serif for U+0020 to U+007E, thousandths of the font size. */
const ADVANCES = [
  278, 278, 355, 556, 556, 889, 667, 191, 333, 333, 389, 584, 278, 333, 278, 278, 556, 556, 556, 556, 556,
  556, 556, 556, 556, 556, 278, 278, 584, 584, 584, 556, 1015, 667, 667, 722, 722, 667, 611, 778, 722, 278,
  500, 667, 556, 833, 722, 778, 667, 778, 722, 667, 611, 722, 667, 944, 667, 667, 611, 278, 278, 278, 469,
  556, 333, 556, 556, 500, 556, 556, 278, 556, 556, 222, 222, 500, 222, 833, 556, 556, 556, 556, 333, 500,
  278, 556, 500, 722, 500, 500, 500, 334, 260, 334, 584,
] as const

const SUPERSCRIPT = /[⁰¹²³⁴⁵⁶⁷⁸⁹⁻]/u
/** Scripts whose characters are as wide as the font is high. */
const FULL_WIDTH =
  /[\u1100-\u11ff\u2e80-\ua4cf\uac00-\ud7a3\uf900-\ufaff\uff00-\uff60]|[\u{1f000}-\u{3ffff}]/u

/**
 * Estimated width of one line of text in the unit of `size`; no font is asked, so that figures are the same
 * everywhere. Good to a few per cent for Latin text in the faces of the figure's stack; empty text gives 0.
 */
export function textWidth(text: string, size: number): number {
  let thousandths = 0
  for (const one of text) {
    const advance = ADVANCES[(one.codePointAt(0) ?? 0) - 32]
    thousandths += advance ?? (SUPERSCRIPT.test(one) ? 350 : FULL_WIDTH.test(one) ? 1000 : 584)
  }
  return (thousandths / 1000) * size
}

/** Text broken at spaces into lines no wider than `width`; a single word that is wider keeps its own line. */
export function wrapText(text: string, size: number, width: number): string[] {
  const lines: string[] = []
  let line = ''
  for (const word of text.split(/\s+/)) {
    if (word === '') continue
    const longer = line === '' ? word : `${line} ${word}`
    if (line !== '' && textWidth(longer, size) > width) {
      lines.push(line)
      line = word
    } else line = longer
  }
  return line === '' ? lines : [...lines, line]
}
