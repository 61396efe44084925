import type { ByteSource } from './byte-source.ts'
import { utf8Text } from './utf8-text.ts'

const PREVIEW_BYTES = 1 << 18

/** First lines of a text file; what lies beyond the last complete line is left out. */
export async function firstText(source: ByteSource): Promise<string> {
  const bytes = await source.read(0, Math.min(source.size, PREVIEW_BYTES))
  const from = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0
  const text = utf8Text(bytes.subarray(from))
  if (bytes.length === source.size) return text
  const cut = Math.max(text.lastIndexOf('\n'), text.lastIndexOf('\r'))
  return cut > 0 ? text.slice(0, cut) : text
}
