/** What each number is and how to read it: two sentences and where the method was published. */
export interface HelpEntry {
  readonly key: string
  readonly term: string
  readonly text: string
  readonly source: string
}

export const HELP: readonly HelpEntry[] = [
  {
    key: 'threshold',
    term: 'Threshold',
    text: 'A bin is on when its counts reach this number, measured at the mean baseline; where the baseline moves, the line moves with it. Drag it, type it, or use the arrow keys (Shift for ten counts): everything below follows, because all thresholds were computed beforehand.',
    source:
      'Equal-likelihood crossing of two Poisson levels; least-variance split: Otsu, IEEE Trans. Syst. Man Cybern. 9, 62 (1979).',
  },
  {
    key: 'baseline',
    term: 'Baseline and band',
    text: 'The off level, background included, is estimated only from bins that are confidently off, so that it cannot climb into long on-times; its 95 % band widens where there was nothing to rest on. Counts are never altered: the baseline enters the model and is subtracted only for display.',
    source:
      'Penalised Poisson likelihood; smoothing by differences: Eilers and Marx, Stat. Sci. 11, 89 (1996).',
  },
  {
    key: 'plant',
    term: 'Plant an event',
    text: 'Puts a synthetic on-time of the length you choose into a dark stretch of this record and runs the same baseline and threshold again. If less than all of it survives, on-times of that length cannot be trusted under these choices.',
    source: 'Recovery test, defined here.',
  },
  {
    key: 'errors',
    term: 'False on, false off',
    text: 'The chance that shot noise alone calls an off bin on, or an on bin off, at this threshold. Multiplied by the number of bins it tells how many spurious and split events to expect.',
    source: 'Poisson tail probabilities.',
  },
  {
    key: 'artefact',
    term: 'Artefact cutoff',
    text: 'Every miscalled bin ends a dwell, so threshold errors alone make dwell times fall off exponentially after about this time. A fitted cutoff is believable when it is at least ten times shorter.',
    source: 'Bin width over the error rate per bin; a competing constant hazard.',
  },
  {
    key: 'on-fraction',
    term: 'On fraction',
    text: 'The share of usable time spent on, corrected for the two error rates. Its interval comes from resampling whole stretches of the record, since neighbouring bins are not independent; with heavy-tailed dwells it is wide for good reason.',
    source:
      'Block bootstrap: Künsch, Ann. Stat. 17, 1217 (1989); Politis and Romano, J. Am. Stat. Assoc. 89, 1303 (1994).',
  },
  {
    key: 'alpha',
    term: 'Exponent α',
    text: 'The exponent of the dwell-time density, P(t) ∝ t^−α, always positive. The interval is a profile-likelihood interval from the exact probability of seeing each whole number of bins, with the last dwell censored.',
    source:
      'Maximum likelihood instead of a line through a histogram: Clauset, Shalizi and Newman, SIAM Rev. 51, 661 (2009); Hoogenboom, den Otter and Offerhaus, J. Chem. Phys. 125, 204713 (2006).',
  },
  {
    key: 'tau',
    term: 'Cutoff time τ',
    text: 'Where the power law bends into an exponential; the two forms (density, survival) give different numbers, so the form is always named. When the data are compatible with no cutoff, only a lower bound is given.',
    source: 'Boundary-corrected test: Self and Liang, J. Am. Stat. Assoc. 82, 605 (1987).',
  },
  {
    key: 'weights',
    term: 'Law weights',
    text: 'How the laws share the evidence among them, from AICc at the same shortest fitted dwell. A weight near one compares only the laws listed; look at the goodness of fit before believing any.',
    source:
      'Burnham and Anderson, Model Selection and Multimodel Inference, Springer (2002); Vuong, Econometrica 57, 307 (1989).',
  },
  {
    key: 'goodness',
    term: 'Goodness of fit',
    text: 'The largest distance between the observed and fitted survival, compared with data simulated from the fit under the same censoring and fitted again. A p below about 0.1 says that the law does not describe these dwells.',
    source:
      'Parametric bootstrap of the Kolmogorov–Smirnov distance: Clauset, Shalizi and Newman, SIAM Rev. 51, 661 (2009).',
  },
  {
    key: 'shortest',
    term: 'Shortest fitted dwell',
    text: 'Dwells below this are shown but not fitted: the largest of three bins, the length from which predicted spurious events are rare, and the number you choose as safe against blinking inside a bin. Move its mark and watch whether the exponent stays.',
    source: 'Missed events distort short dwells: The and Timmer, J. R. Soc. Interface 3, 87 (2006).',
  },
  {
    key: 'density',
    term: 'Density, survival, t × hazard',
    text: 'Density points are counts per width with exact Poisson bars; survival is the product-limit estimate with censored dwells in it; t × hazard is flat for a power law, rises at an exponential cutoff and falls for a log-normal. Hollow marks are dwells cut by the record.',
    source:
      'Garwood, Biometrika 28, 437 (1936); Kaplan and Meier, J. Am. Stat. Assoc. 53, 457 (1958); Kuno et al., J. Chem. Phys. 115, 1028 (2001).',
  },
  {
    key: 'between',
    term: 'Bins between the levels',
    text: 'Each switch leaves one bin that is partly on, evenly spread between the levels, so their number is known from the number of switches. Many more mean a grey level or blinking faster than the bin, and exponents then read low.',
    source: 'Mixed-bin count, derived here.',
  },
  {
    key: 'bin',
    term: 'Suggested bin',
    text: 'The shortest bin at which less than one bin of the record is expected to be miscalled. Wider bins are safer against shot noise and blinder to short dwells.',
    source: 'Chernoff bound for two Poisson levels: Chernoff, Ann. Math. Stat. 23, 493 (1952).',
  },
]

export const CAUTION =
  'Experiments behind these numbers use lasers, often invisible ones, and materials that can be toxic. This program controls no hardware and states no exposure limits: before raising a power or changing a beam, follow your local rules and ask your laser safety officer; handle emitters by their safety data sheets.'
