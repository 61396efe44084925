import fc from 'fast-check'
import type { ImportAnswer } from '../../src/core/read/import-answer.ts'
import type { RecordOrigin } from '../../src/session/schema/record-origin.ts'
import type { EmitterEntry, Session } from '../../src/session/schema/session.ts'
import { anyRecipe } from '../core/recipe/any-recipe.ts'

/** Names as users and attackers write them. */
export const hostileText = fc.oneof(
  fc.string({ unit: 'binary', maxLength: 40 }),
  fc.constantFrom(
    '=1+1',
    '</metadata><script>alert(1)</script>',
    ']]>',
    '&amp;',
    '"\'<>&',
    '\ud800',
    '\udc00x',
    '\uffff\ufffe',
    'a\u0000b\u0001\u000b',
    'line\nline\r\nline\u2028',
    '__proto__',
    '',
  ),
)

const hex = fc.string({
  unit: fc.constantFrom(...'0123456789abcdef'.split('')),
  minLength: 64,
  maxLength: 64,
})

const positive = fc.option(fc.double({ min: 1e-12, max: 1e6, noNaN: true }))
const unit = fc.option(
  fc.constantFrom('s' as const, 'ms' as const, 'us' as const, 'ns' as const, 'ticks' as const),
)

const anyAnswer: fc.Arbitrary<ImportAnswer> = fc.oneof(
  fc.record({
    kind: fc.constant('text' as const),
    delimiter: fc.constantFrom('\t' as const, ',' as const, ';' as const, ' ' as const),
    decimalComma: fc.boolean(),
    headerLines: fc.nat(1000),
    columns: fc.array(fc.constantFrom('time' as const, 'counts' as const, 'ignore' as const), {
      minLength: 1,
    }),
    names: fc.array(hostileText),
    timeUnit: unit,
    tickSeconds: positive,
    binSeconds: positive,
  }),
  fc.record({
    kind: fc.constantFrom('npy' as const, 'npz' as const),
    member: fc.option(hostileText),
    content: fc.option(fc.constantFrom('arrival' as const, 'counts' as const)),
    timeUnit: unit,
    tickSeconds: positive,
    binSeconds: positive,
    emitters: fc.constantFrom('rows' as const, 'columns' as const),
  }),
)

export const anyOrigin: fc.Arbitrary<RecordOrigin> = fc.oneof(
  fc.record({ kind: fc.constant('demonstration' as const), name: hostileText }),
  fc.record({
    kind: fc.constant('file' as const),
    fileName: hostileText,
    sha256: hex,
    sizeBytes: fc.nat(),
    answer: anyAnswer,
    index: fc.nat(1000),
    column: fc.option(fc.nat(1000)),
  }),
)

const anyEmitter: fc.Arbitrary<EmitterEntry> = fc.record({
  id: fc.uuid(),
  name: hostileText,
  origin: anyOrigin,
  difference: fc.oneof(
    fc.constant({}),
    anyRecipe.map(({ threshold, bin }) => ({ threshold, bin })),
    anyRecipe.map(({ threshold: { rule, handCounts } }) => ({ threshold: { rule, handCounts } })),
  ),
})

/** Any session the program can save. */
export const anySession: fc.Arbitrary<Session> = fc
  .record({
    id: fc.uuid(),
    name: hostileText,
    recipe: anyRecipe,
    emitters: fc.uniqueArray(anyEmitter, { selector: ({ id }) => id, maxLength: 12, size: 'max' }),
    current: fc.nat(11),
    windows: fc.array(fc.tuple(fc.double({ noNaN: true, min: -1e6, max: 1e6 }), fc.nat(1000))),
    dwellPlot: fc.constantFrom('density' as const, 'survival' as const, 'hazard' as const),
    answers: fc.dictionary(fc.stringMatching(/^text[a-z;, ]{1,20}$/), anyAnswer, { maxKeys: 4 }),
  })
  .map(({ id, name, recipe, emitters, current, windows, dwellPlot, answers }) => ({
    version: 2 as const,
    id,
    name,
    changedAt: '2031-02-03T04:05:06.789Z',
    recipe,
    emitters,
    currentEmitterId: emitters[current]?.id ?? null,
    view: {
      windows: Object.fromEntries(
        windows.flatMap(([from, length], index) =>
          index < emitters.length ? [[emitters[index].id, [from, from + length] as const] as const] : [],
        ),
      ),
      dwellPlot,
    },
    importAnswers: { ...answers },
  }))
