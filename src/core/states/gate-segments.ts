/** Code of bins that belong to no gate class. */
export const GUARD_CODE = 3

/** Stretches of equal gate code, covering the record. */
export interface GateSegments {
  /** First bin of each segment; one more entry closes the last. */
  readonly starts: Uint32Array
  readonly codes: Uint8Array
  /** Segment of every bin. */
  readonly ofBin: Uint32Array
}

export function gateSegments(codes: Uint8Array): GateSegments {
  const starts: number[] = []
  const ofBin = new Uint32Array(codes.length)
  for (let i = 0; i < codes.length; i++) {
    if (i === 0 || codes[i] !== codes[i - 1]) starts.push(i)
    ofBin[i] = starts.length - 1
  }
  const segmentCodes = Uint8Array.from(starts, (start) => codes[start])
  return { starts: Uint32Array.from([...starts, codes.length]), codes: segmentCodes, ofBin }
}
