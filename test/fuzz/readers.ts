import { fuzzReaders } from './fuzz-readers.ts'

/** `npx tsx test/fuzz/readers.ts --inputs 100000 --seed 1`: damaged files through all readers; exit code 1 on any fault. */
function option(name: string, fallback: number): number {
  const at = process.argv.indexOf(`--${name}`)
  if (at < 0) return fallback
  const value = Number(process.argv[at + 1])
  if (!Number.isInteger(value) || value < 1)
    throw new RangeError(`--${name} expects a whole number of 1 or more`)
  return value
}

const inputs = option('inputs', 100_000)
const seed = option('seed', 1)
const report = await fuzzReaders(inputs, seed)
console.info(
  `${report.inputs} inputs (seed ${seed}): ${report.read} read and equal to the slow reader, ${report.readWithNotes} of them with gaps, rounding or unused columns said; ${report.refused} refused in a sentence; of ${report.unharmed} unharmed files ${report.unharmedRead} read; slowest ${report.slowestSeconds.toFixed(2)} s; ${report.faults.length} faults.`,
)
for (const { input, what, base64 } of report.faults.slice(0, 20))
  console.error(`input ${input}: ${what}\n  ${base64.slice(0, 2000)}`)
if (report.faults.length > 0) process.exitCode = 1
