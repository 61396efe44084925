import { durationGrid } from '../states/duration-grid.ts'

/**
 * Edges of bins in duration at whole numbers of trace bins, about `perDecade` to a decade: a choice from the
 * edges of the duration grid, so that tallies by column fill them exactly. Starts at 1; the last edge lies
 * above `longestBins`. Bin j holds durations edges[j] <= m < edges[j + 1].
 */
export function durationEdges(longestBins: number, perDecade: number): number[] {
  const ratio = 10 ** (1 / perDecade)
  const edges = [1]
  let wanted = ratio
  for (const edge of durationGrid(Math.ceil(longestBins * ratio) + 1).edges) {
    const last = edges[edges.length - 1]
    if (last > longestBins) break
    // The first grid edge at or past the wanted place, rounded to whole bins.
    if (edge <= last || edge < Math.round(wanted)) continue
    edges.push(edge)
    while (Math.round(wanted) <= edge) wanted *= ratio
  }
  return edges
}
