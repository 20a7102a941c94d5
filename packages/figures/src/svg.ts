/** Building blocks of SVG text: escaped, with fixed number formatting, so that equal input gives equal bytes everywhere. */

export type SvgAttributes = Readonly<Record<string, string | number | undefined>>;

/** Text made safe for an XML text node or attribute; characters that XML 1.0 forbids are replaced by U+FFFD. */
export function escapeXml(text: string): string {
  return text
    .replace(/[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu, '\ufffd')
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;')
    .replace(/"/g, '&quot;');
}

/** A coordinate with at most two decimals, without trailing zeros and without a negative zero. */
export function coordinate(value: number): string {
  const rounded = Math.round(value * 100) / 100;
  return String(rounded === 0 ? 0 : rounded);
}

/** One element; `children` are finished markup. Attributes whose value is undefined are left out. */
export function element(name: string, attributes: SvgAttributes, ...children: readonly string[]): string {
  let open = name;
  for (const [key, value] of Object.entries(attributes))
    if (value !== undefined) open += ` ${key}="${typeof value === 'number' ? coordinate(value) : escapeXml(value)}"`;
  return children.length === 0 ? `<${open}/>` : `<${open}>${children.join('')}</${name}>`;
}

/** One line of text that stands on (x, y). */
export function textLine(x: number, y: number, content: string, attributes: SvgAttributes): string {
  return element('text', { x, y, ...attributes }, escapeXml(content));
}

/** A whole document with its title and description (read aloud by screen readers), on a background of one colour. */
export function svgDocument(
  frame: {
    readonly width: number;
    readonly height: number;
    readonly title: string;
    readonly description: string;
    readonly background: string;
  },
  ...children: readonly string[]
): string {
  const { width, height, title, description, background } = frame;
  return element(
    'svg',
    { xmlns: 'http://www.w3.org/2000/svg', width, height, viewBox: `0 0 ${coordinate(width)} ${coordinate(height)}`, role: 'img' },
    element('title', {}, escapeXml(title)),
    element('desc', {}, escapeXml(description)),
    element('rect', { width, height, fill: background }),
    ...children,
  );
}
