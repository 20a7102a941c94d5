export * from './engine.js';
export * from './engine-config.js';
export * from './qcschema.js';
