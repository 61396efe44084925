/** Counts gathered one after the other. */
export interface GrowingCounts {
  readonly length: number
  push(count: number): void
  /** Appends zeros. */
  skip(bins: number): void
  /** Uint16Array when everything fits, else Uint32Array. */
  finish(): Uint16Array | Uint32Array
}

export function growingCounts(): GrowingCounts {
  let values = new Uint32Array(1 << 14)
  let length = 0
  let highest = 0
  const room = (more: number): void => {
    if (length + more <= values.length) return
    const larger = new Uint32Array(Math.max(length + more, values.length * 2))
    larger.set(values.subarray(0, length))
    values = larger
  }
  return {
    get length() {
      return length
    },
    push(count) {
      if (length === values.length) room(1)
      values[length++] = count
      if (count > highest) highest = count
    },
    skip(bins) {
      room(bins)
      length += bins
    },
    finish: () => (highest < 65536 ? Uint16Array.from(values.subarray(0, length)) : values.slice(0, length)),
  }
}
