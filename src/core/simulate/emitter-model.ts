import type { LawName } from '../laws/law.ts'
import type { DriftTerm } from './drift.ts'

/** A duration law at fixed parameters, conditional on at least shortestSeconds. */
export interface DurationModel {
  readonly law: LawName
  /** Reported parameters by name, e.g. `{ "alpha": 1.5, "tauSeconds": 5 }`; every parameter of the law. */
  readonly parameters: Readonly<Record<string, number>>
  /** Shortest duration, s, > 0; may lie far below any bin. */
  readonly shortestSeconds: number
}

/** One level of the emitter and how long it stays there. */
export interface StateModel {
  /** For people, e.g. `off`, `grey`, `on`. */
  readonly name: string
  /** Whether a two-level description counts this level as on. State 0 is the dark one and does not. */
  readonly countsAsOn: boolean
  /** Rate above the baseline, counts per second, >= 0. */
  readonly signalCps: number
  readonly dwell: DurationModel
  /** Relative chances of the state that follows, one per state; the own entry is 0. This is the occupancy rule. */
  readonly next: readonly number[]
  /**
   * Over-dispersion within the level: the signal is multiplied by a factor of mean 1 and this relative standard
   * deviation (gamma distributed), drawn anew after exponential times of this mean; null for a quiet level.
   */
  readonly flicker: { readonly relativeSd: number; readonly meanSeconds: number } | null
  /**
   * A real effect of the second beam or field on *leaving* this state: while driven, the hazard at every age is
   * hazardFactor times the law's plus extraPerSecond. null for no effect (factor 1, extra 0).
   */
  readonly driven: { readonly hazardFactor: number; readonly extraPerSecond: number } | null
}

/** A square wave: reference first, then driven, over a period of two half-periods. */
export interface GateModel {
  readonly halfPeriodSeconds: number
  /** Start of a reference part, s; the wave runs over the whole record on both sides of it. */
  readonly offsetSeconds: number
  /** Share of the period that is driven, 0..1; 0.5 for equal halves. */
  readonly duty: number
  /** Time after each edge that the returned gate calls guard, s, >= 0. */
  readonly guardSeconds: number
  /** Counts added while driven, counts per second, >= 0. */
  readonly leakCps: number
  /** Declared minus true time of the edges, s: a gate clock that is off. 0 for a true clock. */
  readonly clockErrorSeconds: number
}

/** A counting detector. */
export interface DetectorModel {
  /** Non-paralysable dead time after every detection, s, >= 0. */
  readonly deadTimeSeconds: number
  /** Each detection, itself possibly an afterpulse, is followed by another after this delay; null for none. */
  readonly afterpulsing: { readonly probability: number; readonly delay: DurationModel } | null
}

/**
 * Everything the simulator needs, as plain JSON. Photon rate at time t, counts per second:
 * baseline(t) + leak while driven + signal of the level x flicker x signal drift(t).
 */
export interface EmitterModel {
  readonly durationSeconds: number
  /** Resolution of arrival times, s. */
  readonly tickSeconds: number
  /** Off level, background included: constant part in counts per second plus terms in counts per second. */
  readonly baseline: { readonly cps: number; readonly drift: readonly DriftTerm[] }
  /** Terms, relative to 1, of the factor on all signals: focus, collection. */
  readonly signalDrift: readonly DriftTerm[]
  /** Two or more; state 0 is dark, bleaching ends there. */
  readonly states: readonly StateModel[]
  /** When the emitter goes dark for good, s; null for never. */
  readonly bleachSeconds: number | null
  readonly gate: GateModel | null
  readonly detector: DetectorModel
}
