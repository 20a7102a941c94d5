/** Colours and fonts of a figure. */
export interface FigureTheme {
  /** The first face should exist where figures are turned into pixels: some renderers look no further. */
  readonly fontFamily: string;
  readonly background: string;
  readonly ink: string;
  /** Secondary text. */
  readonly quiet: string;
  /** Frame, ticks, leader lines. */
  readonly line: string;
  readonly grid: string;
  readonly curve: string;
  /** A second curve that the first is compared with. */
  readonly compared: string;
  readonly well: string;
  readonly barrier: string;
  readonly crossing: string;
  readonly unconverged: string;
  /** The torsion-defining substituents of a Newman projection. */
  readonly torsion: string;
  /** The rear bonds of a Newman projection. */
  readonly rear: string;
}

/**
 * Dark on white. The hues are those of the palette for colour-blind readers by M. Okabe and K. Ito (2008), darkened where they carry text so
 * that every text keeps a contrast of at least 4.5 to 1.
 */
export const LIGHT_THEME: FigureTheme = {
  fontFamily: "'DejaVu Sans', Arial, Helvetica, sans-serif",
  background: '#ffffff',
  ink: '#1c2530',
  quiet: '#5a6673',
  line: '#8a95a1',
  grid: '#e9edf1',
  curve: '#0072b2',
  compared: '#8f3f70',
  well: '#00795a',
  barrier: '#b64a00',
  crossing: '#8f3f70',
  unconverged: '#1c2530',
  torsion: '#b64a00',
  rear: '#a9b4c0',
};
