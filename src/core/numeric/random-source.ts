/** A seeded source of uniform numbers. Core code takes one as an argument; nothing in core makes its own. */
export interface RandomSource {
  /** Uniform in the open interval (0, 1), 53 random bits. */
  uniform(): number
}
