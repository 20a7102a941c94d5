import { Resvg } from '@resvg/resvg-js';

/** The picture as pixels (RGBA, row by row), drawn with or without the fonts of the system. The renderer throws for XML that is not well-formed. */
export function pixels(svg: string, fonts: boolean): Buffer {
  return new Resvg(svg, { font: { loadSystemFonts: fonts } }).render().pixels;
}

/** Width and height of what an SVG document draws, px; null when it draws nothing. */
export function drawnBox(svg: string): { x: number; y: number; width: number; height: number } | null {
  const box = new Resvg(svg, { font: { loadSystemFonts: true } }).getBBox();
  return box ? { x: box.x, y: box.y, width: box.width, height: box.height } : null;
}

const SAMPLE = `<svg xmlns="http://www.w3.org/2000/svg" width="40" height="20"><text x="2" y="15" font-size="16" font-family="'DejaVu Sans'">Wg</text></svg>`;

/** Whether this machine has fonts at all, and the one whose widths the layout is computed with; checks of drawn text make no sense without. */
export const FONTS_INSTALLED = !pixels(SAMPLE, true).equals(pixels(SAMPLE, false));
/** W and g at 16 px are 15.82 and 10.16 px wide in DejaVu Sans; other faces are narrower. */
export const FACE_INSTALLED = Math.abs((drawnBox(SAMPLE)?.width ?? 0) - 25) < 1.2;
