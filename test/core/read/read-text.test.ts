import { describe, expect, it } from 'vitest'
import { bytesSource } from '../../../src/core/read/byte-source.ts'
import { previewSource } from '../../../src/core/read/import-preview.ts'
import { countsIn, problemIn, readGiven, textSource, ticksIn } from './given-source.ts'

/** Ten bins of 10 ms. */
const TIMES = Array.from({ length: 10 }, (_, i) => i / 100)
const COUNTS = [12, 0, 3, 70000, 5, 6, 7, 8, 9, 1]
const OTHERS = [1, 2, 3, 4, 5, 6, 7, 8, 9, 10]

function table(delimiter: string, head: string | null, end = '\n', comma = false): string {
  const number = (value: number): string => (comma ? String(value).replace('.', ',') : String(value))
  const rows = TIMES.map((t, i) => [t, COUNTS[i], OTHERS[i]].map(number).join(delimiter))
  return [...(head === null ? [] : [head]), ...rows].join(end) + end
}

const DELIMITERS = [
  ['comma', ','],
  ['semicolon', ';'],
  ['tab', '\t'],
  ['space', ' '],
  ['spaces', '    '],
  ['comma and space', ', '],
] as const

describe('dialects', () => {
  for (const [word, delimiter] of DELIMITERS) {
    for (const end of ['\n', '\r\n', '\r']) {
      it(`${word}, line end ${JSON.stringify(end)}, header with the unit`, async () => {
        const head = ['time_s', 'dot_A', 'dot_B'].join(delimiter)
        const outcome = await readGiven(textSource(table(delimiter, head, end)))
        expect(countsIn(outcome)).toEqual([COUNTS, OTHERS])
        if (!outcome.ok) return
        const [{ name, column, record }] = outcome.records
        expect([name, column]).toEqual(['dots dot_A', 1])
        expect(record.kind === 'trace' && record.binSeconds).toBeCloseTo(0.01, 12)
        expect(record.kind === 'trace' && record.coverage).toBeNull()
      })
    }
    it(`${word}, no header: the unit is asked for`, async () => {
      const source = textSource(table(delimiter, null))
      const preview = await previewSource(source)
      expect(preview.questions.map((q) => q.key)).toEqual(['timeUnit'])
      expect(preview.guessedUnit).toBe('s')
      expect(preview.questions[0]).toMatchObject({
        choices: ['s', 'ms', 'us', 'ns', 'ticks'],
        guess: 's',
        required: true,
      })
      expect(problemIn(await readGiven(source))).toContain(
        'it is not said the unit of its times. Answer that before opening the file.',
      )
      expect(countsIn(await readGiven(source, { timeUnit: 's' }))).toEqual([COUNTS, OTHERS])
    })
  }
  for (const delimiter of [';', '\t', ' ']) {
    it(`decimal comma with ${JSON.stringify(delimiter)}`, async () => {
      const source = textSource(table(delimiter, `t/s${delimiter}a${delimiter}b`, '\r\n', true))
      expect((await previewSource(source)).answer).toMatchObject({ decimalComma: true, delimiter })
      expect(countsIn(await readGiven(source))).toEqual([COUNTS, OTHERS])
    })
  }
  it('passes over a BOM, comments of every kind and blank lines anywhere', async () => {
    const [head, ...rows] = table(',', 'time (s),a,b').trim().split('\n')
    const text = `\uFEFF# made today\n% really\n\n${head}\n// rows follow\n${rows.join('\n   \n; said so\n')}\n\n# end`
    expect(countsIn(await readGiven(textSource(text)))).toEqual([COUNTS, OTHERS])
  })
  it('takes names from a comment', async () => {
    const outcome = await readGiven(textSource(table('\t', '# time (ms)\tred\tblue')))
    expect(outcome.ok && outcome.records.map(({ name }) => name)).toEqual(['dots red', 'dots blue'])
    expect(outcome.ok && outcome.records[0].record).toMatchObject({ binSeconds: expect.closeTo(1e-5, 12) })
  })
  it('takes quoted names', async () => {
    const outcome = await readGiven(textSource(table(',', '"time (s)","red dot","blue dot"')))
    expect(outcome.ok && outcome.records.map(({ name }) => name)).toEqual(['dots red dot', 'dots blue dot'])
  })
  it('reads a last line without an end', async () => {
    expect(countsIn(await readGiven(textSource('time_s,n\n0,1\n0.1,2\n0.2,3')))).toEqual([[1, 2, 3]])
  })
  it('reads separators left at the ends of rows', async () => {
    expect(countsIn(await readGiven(textSource('time_s,n,\n0,1,\n0.1,2,\n0.2,3,\n')))).toEqual([[1, 2, 3]])
    expect(countsIn(await readGiven(textSource('time_s\tn\t\n0\t1\t\n0.1\t2\t\n0.2\t3\t\n')))).toEqual([
      [1, 2, 3],
    ])
  })
})

describe('units', () => {
  const UNITS = { s: 1, ms: 1e-3, us: 1e-6, µs: 1e-6, ns: 1e-9 }
  for (const [unit, seconds] of Object.entries(UNITS)) {
    it(`said as ${unit}`, async () => {
      for (const head of [`time (${unit})`, `t/${unit}`, `time [${unit}]`, `time_${unit}`]) {
        const outcome = await readGiven(textSource(`${head},n\n0,1\n20,2\n40,3\n`))
        expect(countsIn(outcome)).toEqual([[1, 2, 3]])
        const record = outcome.ok ? outcome.records[0].record : null
        expect(record?.kind === 'trace' && record.binSeconds / (20 * seconds)).toBeCloseTo(1, 12)
      }
    })
  }
  it('counts without times ask for the bin unless it is said', async () => {
    const preview = await previewSource(textSource('5\n3\n9\n0\n'))
    expect(preview.questions.map((q) => q.key)).toContain('binSeconds')
    expect(countsIn(await readGiven(textSource('5\n3\n9\n0\n'), { binSeconds: 0.005 }))).toEqual([
      [5, 3, 9, 0],
    ])
    const said = await readGiven(textSource('counts per 10 ms\n5\n3\n9\n0\n'))
    expect(said.ok && said.records[0].record).toMatchObject({ binSeconds: 0.01 })
  })
  it('rates become counts by the bin', async () => {
    const text = 'time (s),rate (cps)\n0,1200\n0.01,0\n0.02,300\n0.03,100\n'
    expect(countsIn(await readGiven(textSource(text)))).toEqual([[12, 0, 3, 1]])
    const kilo = 'time (ms),signal (kcps)\n0,1.2\n10,0\n20,0.3\n30,0.1\n'
    expect(countsIn(await readGiven(textSource(kilo)))).toEqual([[12, 0, 3, 1]])
  })
})

describe('rounded numbers', () => {
  const rows = (n: number, decimals: number, of: (i: number) => number): string =>
    Array.from({ length: n }, (_, i) => `${(i / 30).toFixed(decimals)},${of(i)}`).join('\n')
  it('times of 1/30 s printed to two decimals are even bins', async () => {
    const outcome = await readGiven(textSource(`time (s),n\n${rows(3000, 2, (i) => i % 9)}\n`))
    expect(countsIn(outcome)).toEqual([Array.from({ length: 3000 }, (_, i) => i % 9)])
    const record = outcome.ok ? outcome.records[0].record : null
    expect(record?.kind === 'trace' && record.binSeconds * 30).toBeCloseTo(1, 4)
    expect(record?.kind === 'trace' && record.coverage).toBeNull()
    expect(outcome.ok && outcome.notes).toEqual([])
  })
  it('a row missing among them is found', async () => {
    const lines = rows(3000, 2, (i) => i % 9).split('\n')
    lines.splice(1234, 2)
    const outcome = await readGiven(textSource(`time (s),n\n${lines.join('\n')}\n`))
    expect(outcome.ok && outcome.notes).toEqual([
      '2 rows are missing in 1 places (first before line 1236); these bins are left empty and are not used.',
    ])
    const expected = Array.from({ length: 3000 }, (_, i) => (i === 1234 || i === 1235 ? 0 : i % 9))
    expect(countsIn(outcome)).toEqual([expected])
  })
  it('rates per second of such bins become whole counts', async () => {
    const text = `time (s),rate (cps)\n${rows(3000, 2, (i) => (i % 200) * 30)}\n`
    const outcome = await readGiven(textSource(text))
    expect(countsIn(outcome)).toEqual([Array.from({ length: 3000 }, (_, i) => i % 200)])
    // A short record with coarse times knows its bin less well; counts are still found.
    const short = await readGiven(textSource(`time (s),rate (cps)\n${rows(150, 2, (i) => (i % 100) * 30)}\n`))
    expect(countsIn(short)).toEqual([Array.from({ length: 150 }, (_, i) => i % 100)])
  })
  it('the rounding of rates is said', async () => {
    const outcome = await readGiven(textSource('time (ms),rate (cps)\n0,1201\n10,0\n20,299\n30,100\n'))
    expect(countsIn(outcome)).toEqual([[12, 0, 3, 1]])
    expect(outcome.ok && outcome.notes).toEqual([
      'Rates times the bin miss whole counts by up to 0.010; they were rounded to whole counts.',
    ])
  })
  it('clocks that jitter are taken as even, and the jitter is said', async () => {
    const text = Array.from(
      { length: 500 },
      (_, i) => `${(i * 10 + (i % 3 === 1 ? 1.2 : 0)).toFixed(4)},${i % 5}`,
    )
    const outcome = await readGiven(textSource(`time (ms),n\n${text.join('\n')}\n`))
    expect(countsIn(outcome)).toEqual([Array.from({ length: 500 }, (_, i) => i % 5)])
    expect(outcome.ok && outcome.notes).toEqual([
      'The times miss even steps by up to 12 % of a step; every row is taken as one whole bin.',
    ])
  })
})

describe('arrival times', () => {
  it('fewer decimals are kept when the record is too long for all of them, and that is said', async () => {
    const rows = Array.from({ length: 3000 }, (_, i) => (i * 40 + 0.1234567893).toFixed(11))
    const outcome = await readGiven(textSource(`arrival (s)\n${rows.join('\n')}\n`))
    const ticks = ticksIn(outcome)
    const record = outcome.ok ? outcome.records[0].record : null
    expect(record).toMatchObject({ kind: 'photons', tickSeconds: 1e-9 })
    expect(ticks).toEqual(Array.from({ length: 3000 }, (_, i) => i * 40e9 + 123456789))
    expect(outcome.ok && outcome.notes.join(' ')).toContain(
      '3000 arrival times have more decimals than are kept and were rounded to 1e-9 s.',
    )
  })
  it('decimals beyond a picosecond are rounded and said', async () => {
    const outcome = await readGiven(textSource('arrival (ns)\n0.12345\n7000000.5\n'))
    expect(ticksIn(outcome)).toEqual([123, 7_000_000_500])
    expect(outcome.ok && outcome.notes.join(' ')).toContain(
      '1 arrival times have more decimals than are kept',
    )
  })
  it('a second column of arrival times is not dropped in silence', async () => {
    const source = textSource('arrival 1 (us),arrival 2 (us)\n1,5\n2,6\n4,7\n')
    expect((await previewSource(source)).understood.join(' ')).toContain(
      'Only the first of 2 columns of arrival',
    )
    const outcome = await readGiven(source, { columns: ['arrival', 'arrival'] })
    expect(outcome.ok && outcome.notes.join(' ')).toContain('Beside the arrival times, 1 column was not used')
  })
  it('ticks are the decimal, not a quotient near it', async () => {
    const outcome = await readGiven(textSource('arrival (us)\n0.125\n1.250\n7.000\n'))
    expect(outcome.ok && outcome.records[0].record).toMatchObject({ tickSeconds: 1e-9 })
  })
  it('one column, unit said', async () => {
    const outcome = await readGiven(textSource('arrival (us)\n0.5\n1.25\n1.25\n7\n'))
    expect(ticksIn(outcome)).toEqual([50, 125, 125, 700])
    expect(outcome.ok && outcome.records[0].record).toMatchObject({ tickSeconds: expect.closeTo(1e-8, 20) })
  })
  it('asked for the unit and the meaning when the file does not say', async () => {
    const source = textSource('100\n250\n250\n99000\n')
    const preview = await previewSource(source)
    expect(preview.questions.map((q) => q.key)).toEqual(['content', 'timeUnit'])
    expect(ticksIn(await readGiven(source, { timeUnit: 'ns' }))).toEqual([100, 250, 250, 99000])
  })
  it('ticks of a length', async () => {
    const outcome = await readGiven(textSource('1\n5\n5\n7\n'), { timeUnit: 'ticks', tickSeconds: 2.5e-8 })
    expect(ticksIn(outcome)).toEqual([1, 5, 5, 7])
    expect(outcome.ok && outcome.records[0].record).toMatchObject({ tickSeconds: 2.5e-8 })
  })
  it('counts what it rounds', async () => {
    const rows = Array.from({ length: 60_000 }, (_, i) => `${i}.5`)
    const text = `arrival (us)\n${rows.join('\n')}\n60000.5125\n60000.75\n`
    const outcome = await readGiven(textSource(text))
    expect(outcome.ok && outcome.notes.join(' ')).toMatch(
      /^.*60002 photons\. 2 arrival times have more decimals than are kept/,
    )
  })
  it('says which columns are not used', async () => {
    const outcome = await readGiven(textSource('arrival (us),counts\n1,5\n2,6\n4,7\n'))
    expect(outcome.ok && outcome.notes.join(' ')).toContain('Beside the arrival times, 1 column was not used')
  })
})

describe('gaps', () => {
  it('leaves missing bins empty, uncovered and counted', async () => {
    const outcome = await readGiven(textSource('time_ms,n\n0,1\n10,2\n20,3\n50,4\n60,5\n90,6\n'))
    expect(countsIn(outcome)).toEqual([[1, 2, 3, 0, 0, 4, 5, 0, 0, 6]])
    if (!outcome.ok) return
    expect(outcome.notes[0]).toContain('4 rows are missing in 2 places (first before line 5)')
    const { record } = outcome.records[0]
    expect(record.kind === 'trace' && Array.from(record.coverage ?? [])).toEqual([
      255, 255, 255, 0, 0, 255, 255, 0, 0, 255,
    ])
  })
  it('a jump far larger than the file is refused', async () => {
    const text = 'time_s,n\n0,1\n1,2\n2,3\n9000000,4\n'
    expect(problemIn(await readGiven(textSource(text)))).toBe(
      '“dots.txt”, line 5: the time jumps over 8999997 bins, far more than the file holds. Correct the time or split the file there.',
    )
  })
})

describe('bad input gets one sentence with the line', () => {
  const CASES: readonly (readonly [string, string, string])[] = [
    ['empty', '', '“dots.txt”: the file is empty. Choose a file with data.'],
    ['header only', 'time_s,n\n', 'no line of it is a row of numbers. Expected columns of numbers'],
    ['words', 'hello\nworld\n', 'no line of it is a row of numbers.'],
    ['comments only', '# a\n# b\n', 'no line of it is a row of numbers.'],
    [
      'ragged, short',
      'time_s,n\n0,1\n1,2\n2\n3,4\n',
      'line 4: expected 2 columns, found 1. Correct the line',
    ],
    [
      'ragged, long',
      'time_s,n\n0,1\n1,2\n2,3,4\n3,4\n',
      'line 4: expected 2 columns, found 3. Correct the line',
    ],
    [
      'empty cell',
      'time_s,n\n0,1\n1,\n2,3\n',
      'line 3: expected a number in column 2, found “”. Correct the line',
    ],
    [
      'NaN',
      'time_s,n\n0,1\n1,NaN\n2,3\n',
      'line 3: expected a number in column 2, found “NaN”. Correct the line',
    ],
    [
      'inf',
      'time_s,n\n0,1\n1,inf\n2,3\n',
      'line 3: expected a number in column 2, found “inf”. Correct the line',
    ],
    [
      'overflow',
      'time_s,n\n0,1\n1,1e999\n2,3\n',
      'line 3: the number “1e999” in column 2 is too large. Correct the line',
    ],
    [
      'negative',
      'time_s,n\n0,1\n1,-4\n2,3\n',
      'line 3: column 2 holds -4; counts cannot be negative. If a background was subtracted, use the counts from before.',
    ],
    [
      'fractional',
      'time_s,counts\n0,1\n1,1.5\n2,3\n',
      'line 3: column 2 holds 1.5; counts are whole numbers. If it is a rate, choose counts per second.',
    ],
    [
      'rate not whole',
      'time_s,rate\n0,1\n1,1.5\n2,3\n',
      'line 3: column 2: the rate 1.5 times the bin of 1 s is 1.50000, not a whole number of counts. Correct the unit of the rate or of the times.',
    ],
    [
      'too many',
      'time_s,n\n0,1\n1,5e9\n2,3\n',
      'line 3: column 2 holds 5000000000, more than a bin can. Correct the line or the reading of columns.',
    ],
    [
      'backwards',
      'time_s,n\n0,1\n2,2\n4,3\n3,4\n6,5\n',
      'line 5: the time 3 is not later than the one before (4). Sort the file',
    ],
    [
      'standing',
      'time_s,n\n0,1\n2,2\n4,3\n4,4\n6,5\n',
      'line 5: the time 4 is not later than the one before (4). Sort the file',
    ],
    [
      'uneven',
      'time_s,n\n0,1\n2,2\n4,3\n5,4\n6,5\n8,6\n10,7\n',
      'line 5: the time advances by 0.500 steps of 2; bins must be even. If these are arrival times, read the column as such; if the times are printed too coarsely, leave them out and give the bin width.',
    ],
    [
      'a step that changes',
      `time_s,n\n${Array.from({ length: 60 }, (_, i) => `${(i < 40 ? i : 40 + (i - 40) * 1.25).toFixed(2)},1`).join('\n')}\n`,
      'the time advances by 1.081 per row on average, by 1.000 in the first rows; bins must be even. Split the file where the step changes.',
    ],
    [
      'arrival backwards',
      'arrival (us)\n1\n3\n2\n',
      'line 4: the arrival time 2 is earlier than the one before (3). Sort the file',
    ],
    ['arrival negative', 'arrival (us)\n-1\n3\n', 'line 2: the arrival time -1 is negative. Shift the times'],
    [
      'arrival too large',
      'arrival (us)\n1\n1e300\n',
      'line 3: the arrival time 1e+300 is too large for a resolution of',
    ],
    ['one row', 'time_s,n\n0,1\n', 'the time column does not advance in its first rows. '],
    [
      'gate',
      'time_s,n,gate\n0,1,0\n1,1,2\n2,1,1\n',
      'line 3: a gate column holds 0 and 1, found 2. Correct the line',
    ],
  ]
  for (const [word, text, sentence] of CASES) {
    it(word, async () => {
      expect(problemIn(await readGiven(textSource(text)))).toContain(sentence)
    })
  }
  it('fractional ticks', async () => {
    const outcome = await readGiven(textSource('arrival\n1\n2.5\n4\n'), {
      timeUnit: 'ticks',
      tickSeconds: 1e-8,
    })
    expect(problemIn(outcome)).toContain('line 3: ticks are whole numbers, found 2.5. Choose a unit of time')
  })
  it('binary taken for text', async () => {
    const bytes = Uint8Array.from({ length: 4000 }, (_, i) => (i * 7919) % 256)
    expect(problemIn(await readGiven(bytesSource(bytes, 'a.dat')))).toBe(
      '“a.dat”: the file is neither text nor a format this version reads. Export it as delimited text or .npy.',
    )
  })
  it('UTF-16, with and without a byte order mark', async () => {
    const wide = (text: string): Uint8Array => new Uint8Array(Buffer.from(text, 'utf16le'))
    expect(problemIn(await readGiven(bytesSource(wide('\uFEFF1,2\n3,4\n'), 'a.csv')))).toBe(
      '“a.csv”: the text is in UTF-16. Save it as UTF-8 or plain text.',
    )
    expect(problemIn(await readGiven(bytesSource(wide('1,2\n3,4\n'), 'a.csv')))).toContain('neither text nor')
  })
  it('a name that lies', async () => {
    expect(problemIn(await readGiven(textSource('1,2\n3,4\n', 'a.npy')))).toContain(
      'the name says NumPy, but the file does not begin like one.',
    )
  })
})

describe('gates', () => {
  it('columns of times and gates beyond the first are not dropped in silence', async () => {
    const source = textSource('time_s,n,field,gate\n0,1,0,1\n1,5,1,0\n2,3,0,1\n')
    const outcome = await readGiven(source, { columns: ['time', 'counts', 'gate', 'gate'] })
    expect(outcome.ok && outcome.notes).toEqual(['1 more column of times or gates was not used.'])
  })
  it('windows keep to the bins when the first steps are rounded', async () => {
    // Bins of 1/30 s printed to 3 decimals, from 5 s on.
    const rows = Array.from({ length: 3000 }, (_, i) => `${(5 + i / 30).toFixed(3)},1,${i >= 2000 ? 1 : 0}`)
    const outcome = await readGiven(textSource(`time_s,n,field\n${rows.join('\n')}\n`))
    if (!outcome.ok) throw new Error(outcome.problem.sentence)
    const [{ record, gate }] = outcome.records
    expect(record.kind === 'trace' && record.binSeconds).toBeCloseTo(1 / 30, 6)
    expect(gate?.windows.length).toBe(1)
    expect(gate?.windows[0].startSeconds).toBeCloseTo(5 + 2000 / 30, 2)
    expect(gate?.windows[0].endSeconds).toBeCloseTo(105, 2)
  })
  it('a column of 0 and 1 becomes windows', async () => {
    const outcome = await readGiven(textSource('time_s,n,field\n0,1,0\n1,1,1\n2,1,1\n3,1,0\n4,2,1\n'))
    expect(outcome.ok && outcome.records[0].gate?.windows).toEqual([
      { startSeconds: 1, endSeconds: 3, gateClass: 'driven' },
      { startSeconds: 4, endSeconds: 5, gateClass: 'driven' },
    ])
  })
})
