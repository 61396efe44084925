import { readdirSync, readFileSync } from 'node:fs'
import { dirname, join, relative, resolve } from 'node:path'
import { describe, expect, it } from 'vitest'

/**
 * The house: a file imports only from its own folder or from a folder of lower rank. `import type` counts.
 * Keep in step with the table in DEVELOPERS.md.
 */
const RANKS: Record<string, number> = {
  'core/numeric': 0,
  'core/laws': 1,
  'core/photons': 1,
  'core/recipe': 2,
  'core/read': 3,
  'core/baseline': 3,
  'core/states': 4,
  'core/dwells': 5,
  'core/simulate': 5,
  'core/fits': 6,
  'core/population': 7,
  'core/pipeline': 8,
  'core/audit': 9,
  'figures/scene': 10,
  'figures/paint': 10,
  'session/schema': 10,
  'worker/protocol': 10,
  'session/store': 11,
  'worker/host': 11,
  'worker/client': 11,
  'state/choices': 11,
  'state/view': 11,
  'state/results': 11,
  batch: 11,
  'ui/shell': 12,
  'ui/controls': 12,
  'ui/bridge': 12,
  'ui/bench': 12,
  'ui/tray': 12,
  'ui/contrast': 12,
  'ui/audit': 12,
  'ui/plates': 12,
  styles: 12,
  'main.tsx': 13,
}

/** Folders of one rank that may see each other, one way only. */
const SAME_RANK: Record<string, readonly string[]> = {
  'figures/paint': ['figures/scene'],
  'session/schema': [],
  'state/results': ['state/choices', 'state/view'],
  'worker/protocol': ['session/schema'],
  'worker/client': [],
  'ui/bridge': [],
  'ui/controls': ['ui/bridge'],
  'ui/bench': ['ui/bridge', 'ui/controls'],
  'ui/shell': ['ui/bridge', 'ui/controls', 'ui/bench'],
}

/** Packages that only some folders may import. */
const WALLS: Record<string, readonly string[]> = {
  react: ['ui/', 'main.tsx'],
  'react-dom': ['ui/', 'main.tsx'],
  'react-dom/client': ['main.tsx'],
  comlink: ['worker/'],
  'idb-keyval': ['session/store'],
  d3: ['figures/', 'ui/'],
}

const SRC = resolve(import.meta.dirname, '../src')
const FILES = (readdirSync(SRC, { recursive: true }) as string[])
  .filter((f) => /\.tsx?$/.test(f) && !f.endsWith('.d.ts'))
  .map((f) => f.replaceAll('\\', '/'))

function roomOf(file: string): string {
  const parts = file.split('/')
  if (parts.length === 1) return file
  if (parts[0] === 'batch' || parts[0] === 'styles') return parts[0]
  return parts.slice(0, 2).join('/')
}

const IMPORT =
  /(?:^|\n)\s*(?:import|export)\s(?:[^'"`;]*?\sfrom\s+)?['"]([^'"]+)['"]|(?:\bimport|new URL|new Worker)\(\s*['"]([^'"]+)['"]|import\(\s*['"]([^'"]+)['"]\s*\)/g

interface Edge {
  from: string
  to: string
  bare: boolean
}

function edgesOf(file: string): Edge[] {
  const text = readFileSync(join(SRC, file), 'utf8')
  return [...text.matchAll(IMPORT)].map((match) => {
    const target = match[1] ?? match[2] ?? match[3]
    if (!target.startsWith('.')) return { from: file, to: target, bare: true }
    const to = relative(SRC, resolve(SRC, dirname(file), target.replace(/\?.*$/, ''))).replaceAll('\\', '/')
    return { from: file, to, bare: false }
  })
}

const EDGES = FILES.flatMap(edgesOf)
const INNER = EDGES.filter((e) => !e.bare && /\.tsx?$/.test(e.to))

describe('the house', () => {
  it('has a rank for every room', () => {
    expect(FILES.filter((f) => RANKS[roomOf(f)] === undefined)).toEqual([])
  })

  it('imports only from the same room or a room of lower rank, types counted', () => {
    const wrong = INNER.filter(({ from, to }) => {
      const [a, b] = [roomOf(from), roomOf(to)]
      if (a === b) return false
      const [ra, rb] = [RANKS[a] ?? -1, RANKS[b] ?? 99]
      return !(rb < ra || (rb === ra && SAME_RANK[a]?.includes(b)))
    })
    expect(wrong.map((e) => `${e.from} -> ${e.to}`)).toEqual([])
  })

  it('has no import cycle', () => {
    const next = new Map<string, string[]>()
    for (const { from, to } of INNER) next.set(from, [...(next.get(from) ?? []), to])
    const done = new Set<string>()
    const cycles: string[] = []
    const walk = (file: string, path: string[]): void => {
      if (path.includes(file)) {
        cycles.push([...path.slice(path.indexOf(file)), file].join(' -> '))
        return
      }
      if (done.has(file)) return
      for (const to of next.get(file) ?? []) walk(to, [...path, file])
      done.add(file)
    }
    for (const file of FILES) walk(file, [])
    expect(cycles).toEqual([])
  })

  it('keeps the walls: some packages belong to some rooms', () => {
    const wrong = EDGES.filter(
      (e) => e.bare && WALLS[e.to] !== undefined && !WALLS[e.to]?.some((room) => e.from.startsWith(room)),
    )
    expect(wrong.map((e) => `${e.from} -> ${e.to}`)).toEqual([])
  })

  it('keeps clock, global randomness and the page out of core', () => {
    const wrong = FILES.filter((f) => f.startsWith('core/')).filter((f) =>
      /\bMath\.random\(|\bDate\.now\(|\bnew Date\(\)|\bperformance\.now\(|\bdocument\.|\bwindow\./.test(
        readFileSync(join(SRC, f), 'utf8').replace(/\/\*[\s\S]*?\*\/|\/\/.*$/gm, ''),
      ),
    )
    expect(wrong).toEqual([])
  })

  it('has no file above 400 lines and no barrel', () => {
    const sizes = FILES.map((f) => ({ f, lines: readFileSync(join(SRC, f), 'utf8').split('\n').length }))
    sizes.sort((a, b) => b.lines - a.lines)
    const median = sizes[Math.floor(sizes.length / 2)]?.lines ?? 0
    console.info(
      `${sizes.length} source files, median ${median} lines; largest:\n` +
        sizes
          .slice(0, 8)
          .map((s) => `  ${s.lines} ${s.f}`)
          .join('\n'),
    )
    expect(sizes.filter((s) => s.lines > 400)).toEqual([])
    expect(FILES.filter((f) => /(^|\/)index\.tsx?$/.test(f))).toEqual([])
  })
})
