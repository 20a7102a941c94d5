export * from './mmff94.js';
export * from './parameters/assign-parameters.js';
export { PARAMETER_SOURCES, type ParameterSource } from './parameters/source.js';
export type { TorsionSeries, TorsionSeriesTerm } from './parameters/torsion-series-parameters.js';
export type { Dielectric } from './terms/electrostatic.js';
export { type NonBondedRows, nonBondedRows } from './terms/non-bonded.js';
export * from './torsion-terms.js';
