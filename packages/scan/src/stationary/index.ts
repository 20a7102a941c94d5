export { numericalHessian } from './hessian.js';
export type { Motion } from './motion.js';
export { type Modes, projectedModes, rigidMotions } from './projected-modes.js';
export type { Candidate, Candidates, PathEnd, ProofOptions, ProvedPoint, ProvedPoints, Verdict } from './proof-task.js';
export { proof } from './prove.js';
export { type SaddleOptions, type StationaryStructure, stationaryPoint } from './saddle.js';
export { type Minimum, sameMinimum } from './same-minimum.js';
