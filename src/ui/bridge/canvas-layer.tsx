import { useEffect, useRef } from 'react'

export interface CanvasSize {
  /** CSS px. */
  readonly width: number
  readonly height: number
  readonly pixelRatio: number
}

interface CanvasLayerProps {
  readonly className?: string
  /** Called with the drawing context whenever a repaint is due; the context is scaled to CSS px and cleared. */
  readonly paint: (context: CanvasRenderingContext2D, size: CanvasSize) => void
  /** Hands out a function that repaints now; called again with null at unmount. */
  readonly onReady: (repaint: (() => void) | null) => void
}

/** React owns the element and its size; `paint` draws. The canvas itself is hidden from assistive technology. */
export function CanvasLayer({ className = '', paint, onReady }: CanvasLayerProps) {
  const ref = useRef<HTMLCanvasElement>(null)
  const latest = useRef(paint)
  latest.current = paint
  const ready = useRef(onReady)
  ready.current = onReady

  useEffect(() => {
    const canvas = ref.current
    const context = canvas?.getContext('2d')
    if (canvas === null || context === null || context === undefined) return
    let size: CanvasSize = { width: 0, height: 0, pixelRatio: 1 }
    const repaint = (): void => {
      if (size.width === 0 || size.height === 0) return
      context.setTransform(size.pixelRatio, 0, 0, size.pixelRatio, 0, 0)
      context.clearRect(0, 0, size.width, size.height)
      latest.current(context, size)
    }
    const resize = (): void => {
      const { width, height } = canvas.getBoundingClientRect()
      const pixelRatio = window.devicePixelRatio || 1
      if (width === size.width && height === size.height && pixelRatio === size.pixelRatio) return
      size = { width, height, pixelRatio }
      canvas.width = Math.round(width * pixelRatio)
      canvas.height = Math.round(height * pixelRatio)
      repaint()
    }
    const observer = new ResizeObserver(resize)
    observer.observe(canvas)
    resize()
    ready.current(repaint)
    return () => {
      observer.disconnect()
      ready.current(null)
    }
  }, [])

  return <canvas ref={ref} className={`layer ${className}`} aria-hidden="true" />
}
