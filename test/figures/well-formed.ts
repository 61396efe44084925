/**
 * Strict check of the XML this program writes: one root, balanced tags, quoted unique attributes, no bare ampersand or
 * angle bracket in text, no forbidden characters. Returns the first problem or null.
 */
export function xmlProblem(xml: string): string | null {
  if (/[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/u.test(xml)) return 'forbidden character'
  const open: string[] = []
  let roots = 0
  let at = 0
  const body = xml.replace(/^<\?xml [^?]*\?>\n?/, '')
  while (at < body.length) {
    const next = body.indexOf('<', at)
    const text = body.slice(at, next < 0 ? body.length : next)
    if (text.includes('>')) return `bare > in text: ${text.slice(0, 40)}`
    if (/&(?!(?:amp|lt|gt|quot|#39);)/.test(text)) return `bare & in text: ${text.slice(0, 40)}`
    if (open.length === 0 && text.trim() !== '') return 'text outside the root'
    if (next < 0) break
    const end = body.indexOf('>', next)
    if (end < 0) return 'unclosed tag'
    const tag = body.slice(next + 1, end)
    at = end + 1
    if (tag.startsWith('/')) {
      const name = tag.slice(1).trim()
      if (open.pop() !== name) return `</${name}> closes something else`
      continue
    }
    const match = /^([A-Za-z][\w:.-]*)((?:\s+[\w:.-]+="[^"<]*")*)\s*(\/?)$/.exec(tag)
    if (match === null) return `malformed tag: <${tag.slice(0, 60)}>`
    const names = [...match[2].matchAll(/\s([\w:.-]+)="([^"]*)"/g)]
    if (new Set(names.map(([, name]) => name)).size !== names.length)
      return `attribute twice in <${match[1]}>`
    if (names.some(([, , value]) => /&(?!(?:amp|lt|gt|quot|#39);)/.test(value)))
      return `bare & in <${match[1]}>`
    if (open.length === 0) roots++
    if (match[3] !== '/') open.push(match[1])
  }
  if (open.length > 0) return `<${open.at(-1)}> is never closed`
  return roots === 1 ? null : `${roots} roots`
}
