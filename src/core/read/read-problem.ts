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

export function failAtLine(file: string, line: number, what: string): never {
  throw new ReadFailure({ sentence: `“${file}”, line ${line}: ${what}`, file, line, byte: null })
}

export function failAtByte(file: string, byte: number, what: string): never {
  throw new ReadFailure({ sentence: `“${file}”, byte ${byte}: ${what}`, file, line: null, byte })
}

export function failWhole(file: string, what: string): never {
  throw new ReadFailure({ sentence: `“${file}”: ${what}`, file, line: null, byte: null })
}

/** Text of a value from a file, short enough for a sentence. */
export function quoted(text: string): string {
  const clean = text.replace(/\p{Cc}/gu, '·')
  return `“${clean.length > 40 ? `${clean.slice(0, 40)}…` : clean}”`
}
