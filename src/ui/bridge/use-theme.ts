import { useEffect, useSyncExternalStore } from 'react'
import { DARK, LIGHT, type Palette } from '../../figures/scene/palette.ts'
import { useView } from './app-context.tsx'

const QUERY = '(prefers-color-scheme: dark)'

function subscribe(listener: () => void): () => void {
  const media = matchMedia(QUERY)
  media.addEventListener('change', listener)
  return () => media.removeEventListener('change', listener)
}

/** The palette in force; also marks the document, so that CSS and canvases agree. */
export function usePalette(): Palette {
  const theme = useView((view) => view.theme)
  const systemDark = useSyncExternalStore(subscribe, () => matchMedia(QUERY).matches)
  const dark = theme === 'dark' || (theme === 'system' && systemDark)
  useEffect(() => {
    document.documentElement.dataset['theme'] = dark ? 'dark' : 'light'
  }, [dark])
  return dark ? DARK : LIGHT
}
