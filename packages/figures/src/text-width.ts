/**
 * Widths of text without a browser: the advance widths of DejaVu Sans, one of the widest common sans-serif faces, so that the true text in another
 * face fits into the box computed here.
 */

/** Thousandths of an em for the characters U+0020 to U+007E. */
const REGULAR = [
  318, 401, 460, 838, 636, 950, 780, 275, 390, 390, 500, 838, 318, 361, 318, 337, 636, 636, 636, 636, 636, 636, 636, 636, 636, 636, 337,
  337, 838, 838, 838, 531, 1000, 684, 686, 698, 770, 632, 575, 775, 752, 295, 295, 656, 557, 863, 748, 787, 603, 787, 695, 635, 611, 732,
  684, 989, 685, 611, 685, 390, 337, 390, 838, 500, 500, 613, 635, 550, 635, 615, 352, 635, 634, 278, 278, 579, 278, 974, 634, 612, 635,
  635, 411, 521, 392, 634, 592, 818, 592, 592, 525, 636, 337, 636, 838,
];

const BOLD = [
  348, 456, 521, 838, 696, 1002, 872, 306, 457, 457, 523, 838, 380, 415, 380, 365, 696, 696, 696, 696, 696, 696, 696, 696, 696, 696, 400,
  400, 838, 838, 838, 580, 1000, 774, 762, 734, 830, 683, 683, 821, 837, 372, 372, 775, 637, 995, 837, 850, 733, 850, 770, 720, 682, 812,
  774, 1103, 771, 724, 725, 457, 365, 457, 838, 500, 500, 675, 716, 593, 716, 678, 435, 716, 712, 343, 343, 665, 343, 1042, 712, 687, 716,
  716, 493, 595, 478, 712, 652, 924, 645, 652, 582, 712, 365, 712, 838,
];

const OTHERS: Readonly<Record<string, number>> = { '°': 500, '·': 380, '–': 500 };

/** Width of one line of text in the unit of `fontSize`; an upper bound for most faces. */
export function textWidth(text: string, fontSize: number, bold = false): number {
  const table = bold ? BOLD : REGULAR;
  let width = 0;
  for (const character of text) width += table[character.charCodeAt(0) - 32] ?? OTHERS[character] ?? 1000;
  return (width * fontSize) / 1000;
}

/** The text itself if it fits into `width`, else its head and tail around an ellipsis. */
export function fitText(text: string, width: number, fontSize: number, bold = false): string {
  if (textWidth(text, fontSize, bold) <= width) return text;
  const characters = [...text];
  for (let kept = characters.length - 1; kept > 2; kept--) {
    const head = Math.ceil(kept / 2);
    const shortened = `${characters.slice(0, head).join('')}…${characters.slice(characters.length - (kept - head)).join('')}`;
    if (textWidth(shortened, fontSize, bold) <= width) return shortened;
  }
  return '…';
}
