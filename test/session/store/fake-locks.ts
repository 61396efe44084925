type Callback = (lock: Lock | null) => unknown

export interface FakeLocks {
  /** The lock manager as one page sees it; what the page holds is free when it closes. */
  page(): Pick<LockManager, 'request'> & { close(): void }
}

/** Exclusive locks shared by the pages of one browser, without queueing: each request says `ifAvailable`. */
export function fakeLocks(): FakeLocks {
  const held = new Map<string, object>()
  return {
    page() {
      const owner = {}
      const request = async (
        name: string,
        options: LockOptions | Callback,
        last?: Callback,
      ): Promise<unknown> => {
        const callback = last ?? (options as Callback)
        if (held.has(name)) return callback(null)
        held.set(name, owner)
        try {
          return await callback({ name, mode: 'exclusive' })
        } finally {
          held.delete(name)
        }
      }
      return {
        request,
        close() {
          for (const [name, by] of held) if (by === owner) held.delete(name)
        },
      }
    },
  }
}
