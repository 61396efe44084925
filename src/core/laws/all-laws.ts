import { exponential } from './exponential.ts'
import type { Law, LawName } from './law.ts'
import { logNormal } from './log-normal.ts'
import { powerCutoffDensity } from './power-cutoff-density.ts'
import { powerCutoffSurvival } from './power-cutoff-survival.ts'
import { power } from './power.ts'
import { stretched } from './stretched.ts'

/** Every law by its name in the result document. */
export const LAWS: Readonly<Record<LawName, Law>> = {
  power,
  'power-cutoff-survival': powerCutoffSurvival,
  'power-cutoff-density': powerCutoffDensity,
  exponential,
  'log-normal': logNormal,
  stretched,
}

export function lawNamed(name: LawName): Law {
  return LAWS[name]
}
