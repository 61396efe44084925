import { asciiText } from './decimal.ts'

/** UTF-8 as text, or Latin-1 where it is not valid. Core has no TextDecoder. */
export function utf8Text(bytes: Uint8Array): string {
  const latin = asciiText(bytes, 0, bytes.length)
  try {
    return decodeURIComponent(
      latin.replace(/[%\u0080-\u00ff]/g, (c) => `%${c.charCodeAt(0).toString(16).padStart(2, '0')}`),
    )
  } catch {
    return latin
  }
}
