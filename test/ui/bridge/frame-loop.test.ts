import { describe, expect, it } from 'vitest'
import { type FrameLoop, frameLoop } from '../../../src/ui/bridge/frame-loop.ts'

function screen(): { loop: FrameLoop; painted: string[]; scheduled: () => number; frame: () => void } {
  const callbacks: (() => void)[] = []
  const loop = frameLoop((callback) => callbacks.push(callback))
  return {
    loop,
    painted: [],
    scheduled: () => callbacks.length,
    frame: () => {
      for (const callback of callbacks.splice(0)) callback()
    },
  }
}

describe('frameLoop', () => {
  it('paints once a frame what was asked for, in the order of registration', () => {
    const { loop, painted, frame, scheduled } = screen()
    for (const key of ['trace', 'histogram', 'dwells']) loop.add(key, () => painted.push(key))
    loop.request('dwells', 'trace')
    loop.request('trace')
    expect(painted).toEqual([])
    expect(scheduled()).toBe(1)
    frame()
    expect(painted).toEqual(['trace', 'dwells'])
    frame()
    expect(painted).toEqual(['trace', 'dwells'])
  })

  it('paints at once when flushed, and not again in the frame', () => {
    const { loop, painted, frame } = screen()
    loop.add('trace', () => painted.push('trace'))
    loop.request('trace')
    loop.flush()
    expect(painted).toEqual(['trace'])
    frame()
    expect(painted).toEqual(['trace'])
    loop.request('trace')
    frame()
    expect(painted).toEqual(['trace', 'trace'])
  })

  it('a painter that asks for another frame gets the next one', () => {
    const { loop, painted, frame, scheduled } = screen()
    loop.add('trace', () => {
      painted.push('trace')
      if (painted.length < 3) loop.request('trace')
    })
    loop.request('trace')
    frame()
    expect(painted).toHaveLength(1)
    frame()
    frame()
    expect(painted).toHaveLength(3)
    expect(scheduled()).toBe(0)
  })

  it('several painters of one key, each removable', () => {
    const { loop, painted, frame } = screen()
    const remove = loop.add('trace', () => painted.push('one'))
    loop.add('trace', () => painted.push('two'))
    loop.request('trace', 'nobody')
    frame()
    remove()
    loop.request('trace')
    frame()
    expect(painted).toEqual(['one', 'two', 'two'])
  })
})
