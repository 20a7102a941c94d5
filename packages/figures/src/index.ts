export * from './group-label.js';
export * from './newman.js';
export * from './profile-plot.js';
export * from './theme.js';
