import { fork } from 'node:child_process'
import { parseArgs } from 'node:util'
import { SCENARIOS } from './scenario.ts'
import { type RecordOutcome, STAGES, studyRecord, THRESHOLDS } from './study-record.ts'
import { summaryLines } from './summary.ts'

/**
 * Accuracy of the default recipe on simulated records:
 *
 *   npm run accuracy -- --records 200 [--scenario NAME] [--stage counts|occupancy|dwells]
 *                            [--threshold recipe|half|clean-half] [--workers 2] [--json]
 *
 * Per scenario: mean bias of each parameter with its standard error; share of 95 % intervals that hold the truth;
 * standard deviation over records relative to the Cramér-Rao bound for the dwells used; on fraction; failures. Fits use
 * the law that made the dwells, from the shortest dwell of the recipe's rule (3 bins unless shot noise asks for more).
 * Every tenth record also lists the flags the app shows. Seeds are fixed by scenario and record number.
 */
const { values } = parseArgs({
  options: {
    records: { type: 'string', default: '200' },
    scenario: { type: 'string', multiple: true },
    stage: { type: 'string', default: 'counts' },
    threshold: { type: 'string', default: 'recipe' },
    workers: { type: 'string', default: '1' },
    json: { type: 'boolean', default: false },
    part: { type: 'string' },
  },
})
const FLAGGED_EVERY = 10
const records = Number(values.records)
const workers = Number(values.workers)
const stage = STAGES.find((s) => s === values.stage)
const threshold = THRESHOLDS.find((t) => t === values.threshold)
const wanted = values.scenario ?? SCENARIOS.map(({ name }) => name)
const scenarios = SCENARIOS.filter(({ name }) => wanted.includes(name))
if (!Number.isInteger(records) || records < 1 || !Number.isInteger(workers) || workers < 1)
  fail(
    `--records and --workers need whole numbers above 0; received ${values.records} and ${values.workers}.`,
  )
if (stage === undefined) fail(`--stage is one of ${STAGES.join(', ')}; received ${values.stage}.`)
if (threshold === undefined)
  fail(`--threshold is one of ${THRESHOLDS.join(', ')}; received ${values.threshold}.`)
if (scenarios.length !== wanted.length)
  fail(`--scenario is one of ${SCENARIOS.map(({ name }) => name).join(', ')}; received ${wanted.join(', ')}.`)

function fail(sentence: string): never {
  console.error(sentence)
  process.exit(1)
}

function studyPart(name: string, part: number, parts: number): RecordOutcome[] {
  const scenario = SCENARIOS.find((s) => s.name === name) ?? fail(`No scenario ${name}.`)
  const outcomes: RecordOutcome[] = []
  for (let r = part; r < records; r += parts)
    outcomes.push(
      studyRecord(
        scenario,
        { stage: stage ?? 'counts', threshold: threshold ?? 'recipe', flags: r % FLAGGED_EVERY === 0 },
        `accuracy ${name} ${r}`,
      ),
    )
  return outcomes
}

async function studied(name: string): Promise<RecordOutcome[]> {
  if (workers === 1) return studyPart(name, 0, 1)
  const parts = await Promise.all(
    Array.from(
      { length: workers },
      (_, part) =>
        new Promise<RecordOutcome[]>((resolve, reject) => {
          const args = ['--records', String(records), '--scenario', name, '--workers', String(workers)]
          const child = fork(import.meta.filename, [
            ...args,
            '--stage',
            values.stage,
            '--threshold',
            values.threshold,
            '--part',
            String(part),
          ])
          child.on('message', (outcomes) => resolve(outcomes as RecordOutcome[]))
          child.on('error', reject)
          child.on('exit', (code) => {
            if (code !== 0) reject(new Error(`Part ${part} of ${name} ended with code ${code}.`))
          })
        }),
    ),
  )
  return parts.flat()
}

if (values.part !== undefined) {
  process.send?.(studyPart(scenarios[0].name, Number(values.part), workers))
} else {
  for (const scenario of scenarios) {
    const outcomes = await studied(scenario.name)
    if (values.json) {
      console.info(JSON.stringify({ scenario: scenario.name, stage, outcomes }))
      continue
    }
    const [off, on] = scenario.model.states
    console.info(
      [
        `${scenario.name} (${scenario.title}); ${records} records of ${scenario.model.durationSeconds} s, bin ${scenario.binSeconds * 1000} ms; stage ${stage}, threshold ${threshold}`,
        ...summaryLines(outcomes, {
          alphaOn: on.dwell.parameters.alpha,
          alphaOff: off.dwell.parameters.alpha,
          kappaOn: 1 / on.dwell.parameters.tauSeconds,
        }),
        '',
      ].join('\n'),
    )
  }
}
