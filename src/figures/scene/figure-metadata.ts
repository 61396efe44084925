import { escapeXml, unescapeXml } from './xml-text.ts'

/** What a figure carries so that it can be opened again: choices, fingerprints of the data, the numbers it shows. */
export interface FigureMetadata {
  readonly version: string
  /** Recipe, emitter's origin and view; checked by the session's schema when read. */
  readonly recipe: unknown
  readonly recipeHash: string
  readonly emitter: { readonly name: string; readonly origin: unknown }
  readonly threshold: number
  readonly window: readonly [number, number] | null
  readonly numbers: unknown
}

const OPEN = '<heliograph:figure xmlns:heliograph="urn:heliograph:figure:1">'
const CLOSE = '</heliograph:figure>'
const LARGEST_CHARACTERS = 4_000_000

/** A metadata element with the JSON as escaped text; characters that XML forbids stand as JSON escapes. */
export function embedMetadata(metadata: FigureMetadata): string {
  const json = JSON.stringify(metadata).replaceAll('\ufffe', '\\ufffe').replaceAll('\uffff', '\\uffff')
  return `<metadata>${OPEN}${escapeXml(json)}${CLOSE}</metadata>`
}

export type MetadataFound =
  | { readonly ok: true; readonly metadata: FigureMetadata }
  | { readonly ok: false; readonly reason: string }

/** The metadata of a figure this program wrote; from anything else a reason. Only the shape is checked here. */
export function extractMetadata(svg: string): MetadataFound {
  const from = svg.indexOf(OPEN)
  const to = svg.indexOf(CLOSE, from)
  if (from < 0 || to < 0) return { ok: false, reason: 'This SVG carries no Heliograph recipe.' }
  const text = svg.slice(from + OPEN.length, to)
  if (text.length > LARGEST_CHARACTERS)
    return { ok: false, reason: 'The recipe inside this SVG is too large to be one.' }
  let value: unknown
  try {
    value = JSON.parse(unescapeXml(text))
  } catch {
    return {
      ok: false,
      reason: 'The recipe inside this SVG is damaged (not JSON); the figure may have been edited.',
    }
  }
  const one = value as Partial<FigureMetadata> | null
  if (
    one === null ||
    typeof one !== 'object' ||
    typeof one.recipe !== 'object' ||
    one.recipe === null ||
    typeof one.emitter?.name !== 'string' ||
    typeof one.threshold !== 'number'
  ) {
    return { ok: false, reason: 'The recipe inside this SVG lacks parts; the figure may have been edited.' }
  }
  return { ok: true, metadata: one as FigureMetadata }
}
