import type { ByteSource } from './byte-source.ts'
import { asciiText } from './decimal.ts'
import { firstText } from './first-text.ts'
import type { ArrayAnswer, ImportAnswer, TimeUnit } from './import-answer.ts'
import { type ImportQuestion, questionsOf } from './import-question.ts'
import { isNpy, type NpyHeader, readNpyHeader } from './npy-header.ts'
import { npzMembers } from './npz-members.ts'
import { ReadFailure, type ReadProblem } from './read-problem.ts'
import { roleIn } from './said-by-name.ts'
import { startsRising } from './starts-rising.ts'
import { type TextShape, textShape } from './text-shape.ts'
import { isZip } from './zip-directory.ts'

/** One array of an archive. */
export interface ArrayProposal {
  readonly dimensions: number
  readonly answer: ArrayAnswer
}

/** What was understood of a file before it is read; plain JSON. */
export interface Preview {
  readonly file: string
  readonly sizeBytes: number
  readonly kind: ImportAnswer['kind'] | null
  /** Sentences. */
  readonly understood: readonly string[]
  readonly header: readonly string[]
  /** First rows as they stand in the file. */
  readonly rows: readonly (readonly string[])[]
  /** Arrays of an archive. */
  readonly members: readonly string[]
  /** Arrays of an archive with the way each would be read; the first is the one proposed. */
  readonly arrays: readonly ArrayProposal[]
  readonly dimensions: number
  readonly answer: ImportAnswer | null
  readonly questions: readonly ImportQuestion[]
  /** A guess for the unit when it is asked for. */
  readonly guessedUnit: TimeUnit | null
  /** Equal for files of the same shape: their answer can be used again. */
  readonly shapeSignature: string
  readonly problem: ReadProblem | null
}

const PREVIEW_ROWS = 12
const MOST_COLUMNS = 4096

/** Looks at the beginning of a file and proposes how to read it. Never throws on data: see `problem`. */
export async function previewSource(source: ByteSource): Promise<Preview> {
  try {
    if (source.size === 0) return refused(source, 'the file is empty. Choose a file with data.')
    const head = await source.read(0, Math.min(source.size, 16))
    if (isNpy(head)) return await previewNpy(source)
    if (isZip(head)) return await previewNpz(source)
    if (/\.np[yz]$/i.test(source.name))
      return refused(
        source,
        'the name says NumPy, but the file does not begin like one. Save the array again, or rename the file if it is text.',
      )
    if (head[0] === 0x89 && asciiText(head, 1, 4) === 'HDF')
      return refused(
        source,
        'HDF5 files are not read by this version. Export the arrival times as .npy or text.',
      )
    if ((head[0] === 0xff && head[1] === 0xfe) || (head[0] === 0xfe && head[1] === 0xff))
      return refused(source, 'the text is in UTF-16. Save it as UTF-8 or plain text.')
    return await previewText(source)
  } catch (error) {
    if (error instanceof ReadFailure) return { ...refused(source, ''), problem: error.problem }
    throw error
  }
}

function refused(source: ByteSource, what: string): Preview {
  return {
    file: source.name,
    sizeBytes: source.size,
    kind: null,
    understood: [],
    header: [],
    rows: [],
    members: [],
    arrays: [],
    dimensions: 0,
    answer: null,
    questions: [],
    guessedUnit: null,
    shapeSignature: '',
    problem: { sentence: `“${source.name}”: ${what}`, file: source.name, line: null, byte: null },
  }
}

const DELIMITER_WORDS = { '\t': 'tabs', ',': 'commas', ';': 'semicolons', ' ': 'spaces' } as const

async function previewText(source: ByteSource): Promise<Preview> {
  const text = await firstText(source)
  const controls = (text.match(/(?![\t\n\v\f\r])\p{Cc}/gu) ?? []).filter((c) => c < ' ').length
  if (controls > 0)
    return refused(
      source,
      'the file is neither text nor a format this version reads. Export it as delimited text or .npy.',
    )
  const shape = textShape(text)
  if (shape === null)
    return refused(
      source,
      'no line of it is a row of numbers. Expected columns of numbers separated by commas, semicolons, tabs or spaces.',
    )
  const { answer } = shape
  if (answer.columns.length > MOST_COLUMNS)
    return refused(
      source,
      `it has ${answer.columns.length} columns, at most ${MOST_COLUMNS} are read. Turn the table, or save it in parts.`,
    )
  const only = answer.columns.length === 1 && !shape.rolesSaid
  const guessedUnit = guessUnit(shape)
  return {
    ...refused(source, ''),
    kind: 'text',
    understood: [
      `Text, ${answer.columns.length} ${answer.columns.length === 1 ? 'column' : `columns separated by ${DELIMITER_WORDS[answer.delimiter]}`}${answer.decimalComma ? ', decimal comma' : ''}${answer.headerLines > 0 ? `, ${answer.headerLines} line${answer.headerLines > 1 ? 's' : ''} of names` : ''}.`,
      ...understoodTime(shape),
    ],
    header: shape.header,
    rows: shape.rows.slice(0, PREVIEW_ROWS),
    dimensions: 2,
    answer,
    questions: questionsOf(answer, { unit: guessedUnit, content: answer.columns[0] }, only),
    guessedUnit,
    shapeSignature: [
      'text',
      answer.delimiter,
      answer.decimalComma,
      answer.columns.length,
      ...shape.header,
    ].join('|'),
    problem: null,
  }
}

function understoodTime({ answer, header, step }: TextShape): string[] {
  const { columns, timeUnit, tickSeconds } = answer
  const unit = timeUnit === null ? '' : timeUnit === 'ticks' ? ` x ${tickSeconds} s` : ` ${timeUnit}`
  if (columns.includes('arrival')) {
    const more = header.filter((name) => roleIn(name) === 'arrival').length - 1
    return [
      'The times are taken as arrival times of photons.',
      ...(more > 0
        ? [
            `Only the first of ${more + 1} columns of arrival times is read; save the others in files of their own.`,
          ]
        : []),
    ]
  }
  if (!columns.includes('time')) return ['No column of times: every row is one bin.']
  return step === null ? [] : [`The time advances by ${Number(step.toPrecision(6))}${unit} per row.`]
}

/** Bins are usually 1 to 100 ms and records minutes long; the guess that fits best. */
function guessUnit({ answer, step, rows }: TextShape): TimeUnit | null {
  if (answer.columns.includes('time') && step !== null) return step >= 0.5 ? 'ms' : 's'
  const column = answer.columns.indexOf('arrival')
  if (column < 0 || rows.length < 2) return null
  const value = (row: readonly string[]): number => Number(row[column].replace(',', '.'))
  const gap = (value(rows[rows.length - 1]) - value(rows[0])) / (rows.length - 1)
  // Photons come about every 0.1 ms.
  return gap < 0.02 ? 's' : gap < 20 ? 'ms' : gap < 5000 ? 'us' : 'ns'
}

async function previewNpy(source: ByteSource): Promise<Preview> {
  const header = await readNpyHeader(source)
  return previewOfArray(source, header, { kind: 'npy', member: null }, await startsRising(source, header))
}

async function previewNpz(source: ByteSource): Promise<Preview> {
  const { members, problems } = await npzMembers(source)
  if (members.length === 0 && problems.length > 0) throw new ReadFailure(problems[0])
  if (members.length === 0)
    return refused(
      source,
      'the archive holds no NumPy arrays. A session file is opened by dropping it, not as data.',
    )
  const [first] = members
  const preview = previewOfArray(source, first.header, { kind: 'npz', member: first.name }, first.rising)
  const unread =
    problems.length === 0
      ? []
      : [
          `${problems.length} of ${members.length + problems.length} arrays cannot be read; the first: ${problems[0].sentence}`,
        ]
  return {
    ...preview,
    understood: [...preview.understood, ...unread],
    members: members.map(({ name }) => name),
    arrays: members.map(({ name, header, rising }) => ({
      dimensions: header.shape.length,
      answer: proposedAnswer(header, { kind: 'npz', member: name }, rising),
    })),
  }
}

function proposedAnswer(
  { shape }: NpyHeader,
  which: Pick<ArrayAnswer, 'kind' | 'member'>,
  rising: boolean,
): ArrayAnswer {
  const flat = shape.length === 1
  return {
    ...which,
    content: flat ? (rising ? 'arrival' : null) : 'counts',
    timeUnit: null,
    tickSeconds: null,
    binSeconds: null,
    emitters: !flat && shape[0] > shape[1] ? 'columns' : 'rows',
  }
}

function previewOfArray(
  source: ByteSource,
  header: NpyHeader,
  which: Pick<ArrayAnswer, 'kind' | 'member'>,
  rising: boolean,
): Preview {
  const flat = header.shape.length === 1
  const answer = proposedAnswer(header, which, rising)
  const guessedUnit = header.kind === 'f' ? 's' : 'ns'
  const content = rising ? 'arrival' : 'counts'
  return {
    ...refused(source, ''),
    kind: which.kind,
    understood: [
      `NumPy array${which.member === null ? '' : ` “${which.member}”`} of type ${header.dtype}, shape ${header.shape.join(' × ')}.`,
      flat
        ? rising
          ? 'The numbers never decrease: they look like arrival times.'
          : 'One dimension: arrival times or counts per bin.'
        : `The longer axis is taken as time, the other as ${Math.min(...header.shape)} emitters.`,
    ],
    dimensions: header.shape.length,
    answer,
    questions: questionsOf(answer, { unit: guessedUnit, content }, flat && rising),
    guessedUnit,
    shapeSignature: [which.kind, header.dtype, header.shape.length, which.member ?? ''].join('|'),
    problem: null,
  }
}
