export * from './errors.js';
export * from './molecule.js';
