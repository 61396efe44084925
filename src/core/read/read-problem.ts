/** Why a file could not be read: one sentence with the place and what to do. Nothing of the file is kept then. */
export interface ReadProblem {
  readonly sentence: string
  readonly file: string
  /** 1-based line of a text file, or null. */
  readonly line: number | null
  /** Byte offset in a binary file, or null. */
  readonly byte: number | null
}

/** Carried through the readers; caught at their door, never outside. */
export class ReadFailure extends Error {
  readonly problem: ReadProblem
  constructor(problem: ReadProblem) {
    super(problem.sentence)
    this.problem = problem
  }
}

/** Names of files and archive members may hold control characters; a sentence does not. */
function fail(sentence: string, file: string, line: number | null, byte: number | null): never {
  throw new ReadFailure({ sentence: sentence.replace(/\p{Cc}/gu, '·'), file, line, byte })
}

export function failAtLine(file: string, line: number, what: string): never {
  fail(`“${file}”, line ${line}: ${what}`, file, line, null)
}

export function failAtByte(file: string, byte: number, what: string): never {
  fail(`“${file}”, byte ${byte}: ${what}`, file, null, byte)
}

export function failWhole(file: string, what: string): never {
  fail(`“${file}”: ${what}`, file, null, null)
}

/** Text of a value from a file, short enough for a sentence. */
export function quoted(text: string): string {
  const clean = text.replace(/\p{Cc}/gu, '·')
  return `“${clean.length > 40 ? `${clean.slice(0, 40)}…` : clean}”`
}
