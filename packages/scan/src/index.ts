export * from './drive.js';
export * from './potential.js';
export * from './profile-document.js';
export * from './rotors/index.js';
