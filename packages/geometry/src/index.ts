export * from './automorphisms.js';
export * from './errors.js';
export * from './internal-coordinates.js';
export * from './molecule.js';
export * from './superpose.js';
export * from './turn.js';
