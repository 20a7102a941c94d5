import { describe, expect, it } from 'vitest';
import { coordinate, element, escapeXml, svgDocument } from './svg.js';

describe('svg text', () => {
  it('escapes what XML reserves and replaces what it forbids', () => {
    expect(escapeXml('<a & "b">')).toBe('&lt;a &amp; &quot;b&quot;&gt;');
    expect(escapeXml('a\u0000b\u0008\ud800')).toBe('a\ufffdb\ufffd\ufffd');
    expect(escapeXml('φ 𝛼')).toBe('φ 𝛼');
  });

  it('writes numbers with two decimals at most and without a negative zero', () => {
    expect([1, 1.005, -0.001, 12.3456, -7.5].map(coordinate)).toEqual(['1', '1', '0', '12.35', '-7.5']);
  });

  it('leaves out undefined attributes', () => {
    expect(element('a', { x: 1, y: undefined, z: 'q"' }, 'text')).toBe('<a x="1" z="q&quot;">text</a>');
  });

  it('opens a document with its title and description', () => {
    const svg = svgDocument({ width: 10, height: 20, title: 'T', description: 'D', background: '#fff' });
    expect(svg).toMatch(
      /^<svg xmlns="http:\/\/www.w3.org\/2000\/svg" width="10" height="20" viewBox="0 0 10 20" role="img"><title>T<\/title><desc>D<\/desc>/,
    );
  });
});
