export { type FitCurve, type FitFigure, type FitPlotOptions, fitPlot } from './fit-plot.js';
export { type GroupLabel, groupLabel, type LabelPart, type LabelRun, labelRuns, labelText, reversedLabel } from './group-label.js';
export { describeNewman, type NewmanLayout, type NewmanSubstituent, newmanLayout, newmanProjection } from './newman.js';
export type { ProfilePlotOptions } from './profile-layout.js';
export { profilePlot } from './profile-plot.js';
export * from './theme.js';
