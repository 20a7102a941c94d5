/** Where a constant comes from. */
export const PARAMETER_SOURCES = [
  'specific',
  'equivalent types',
  'wildcard',
  'empirical force constant',
  'empirical rule',
  'series',
] as const;
export type ParameterSource = (typeof PARAMETER_SOURCES)[number];

/** Codes that the tables hold: indices into PARAMETER_SOURCES. */
export const SPECIFIC = 0;
export const EQUIVALENT = 1;
export const WILDCARD = 2;
/** The reference value is tabulated, the force constant follows from a rule. */
export const EMPIRICAL_FORCE = 3;
export const EMPIRICAL = 4;
/** A series of the caller stands in its place. */
export const SERIES = 5;
