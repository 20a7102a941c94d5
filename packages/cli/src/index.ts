export * from '@tordial/analysis';
export * from '@tordial/figures';
export * from '@tordial/forcefield';
export * from '@tordial/geometry';
export * from '@tordial/scan';
export { readProfile } from './profile-reader.js';
export * from './torsion-profile.js';
export { VERSION } from './version.js';
