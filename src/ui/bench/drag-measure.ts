/**
 * Leaves a User Timing measure from a pointer event to the first task after the frame in which everything asked for
 * was repainted. The painting itself happens inside the frame's callbacks; a message posted there is handled right
 * after the frame has been produced.
 */
export function measureToFrame(name: string, at: number): void {
  requestAnimationFrame(() => {
    const channel = new MessageChannel()
    channel.port1.onmessage = () => {
      channel.port1.close()
      try {
        performance.measure(name, { start: at, end: performance.now() })
      } catch {
        // A clock that went backwards leaves no measure.
      }
    }
    channel.port2.postMessage(null)
  })
}
