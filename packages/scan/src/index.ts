export * from './conformers.js';
export * from './drive.js';
export { type DrivenRotor, drivenRotor } from './driven-rotor.js';
export * from './energy-unit.js';
export { type Constraint, type MinimiseOptions, minimise, type Relaxed, relax } from './minimise.js';
export { modelHessian } from './model-hessian.js';
export * from './potential.js';
export type { Preconditioner } from './preconditioner.js';
export type { Profile, ScanPoint } from './profile.js';
export {
  type BranchEnd,
  type CurveExtremum,
  type CurvePiece,
  type CurvePoint,
  energyAt,
  type ProfileCurve,
  profileCurve,
  torqueAt,
} from './profile-curve.js';
export * from './profile-document.js';
export type { StationaryPoint } from './refined-extrema.js';
export { type RelaxAtOptions, type RelaxedAt, relaxAt, relaxationAt } from './relax-at.js';
export * from './rotors/index.js';
export { rounded } from './rounded.js';
export * from './scan-rotor.js';
export type { ScanOptions, ScanProgress } from './scan-task.js';
export * from './stationary/index.js';
