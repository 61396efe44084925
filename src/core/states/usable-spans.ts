/**
 * Stretches of bins between gaps: [starts[j], ends[j]), in order, none empty.
 *
 * @param bins number of bins of the record
 * @param gaps 1 where a bin cannot be used, one entry per bin; null when all can
 */
export function usableSpans(
  bins: number,
  gaps: Uint8Array | null,
): { readonly starts: readonly number[]; readonly ends: readonly number[] } {
  if (gaps === null) return bins > 0 ? { starts: [0], ends: [bins] } : { starts: [], ends: [] }
  const starts: number[] = []
  const ends: number[] = []
  let at = 0
  while (at < bins) {
    const start = gaps.indexOf(0, at)
    if (start < 0) break
    const gap = gaps.indexOf(1, start)
    at = gap < 0 ? bins : gap
    starts.push(start)
    ends.push(at)
  }
  return { starts, ends }
}
