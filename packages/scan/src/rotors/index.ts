export * from './aromatic-atoms.js';
export * from './atom-shape.js';
export * from './bond-kind.js';
export * from './check-torsion.js';
export * from './defining-torsion.js';
export * from './klyne-prelog.js';
export * from './rotor.js';
export * from './symmetry-number.js';
