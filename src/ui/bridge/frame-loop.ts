/**
 * Redraws coalesced to one a frame. Painters are plain functions; asking twice before the frame paints once.
 * Order of painting is the order of registration.
 */
export interface FrameLoop {
  /** Registers a painter; returns its removal. The painter runs when `request` was called with its key. */
  add(key: string, paint: () => void): () => void
  /** Asks that these painters run in the coming frame. */
  request(...keys: readonly string[]): void
  /** Runs what was asked for now, inside the current task; used by drags so that the same frame shows everything. */
  flush(): void
}

export function frameLoop(schedule: (callback: () => void) => number): FrameLoop {
  const painters = new Map<string, Set<() => void>>()
  const asked = new Set<string>()
  let scheduled = false

  const flush = (): void => {
    const keys = [...asked]
    asked.clear()
    for (const key of painters.keys()) {
      if (keys.includes(key)) for (const paint of painters.get(key) ?? []) paint()
    }
  }

  return {
    add(key, paint) {
      const set = painters.get(key) ?? new Set()
      set.add(paint)
      painters.set(key, set)
      return () => set.delete(paint)
    },
    request(...keys) {
      for (const key of keys) asked.add(key)
      if (scheduled) return
      scheduled = true
      schedule(() => {
        scheduled = false
        flush()
      })
    },
    flush,
  }
}
