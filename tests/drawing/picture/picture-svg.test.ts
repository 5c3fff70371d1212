// @vitest-environment jsdom
import { describe, expect, it } from 'vitest';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { PictureSvgOptions } from '#drawing/picture/picture-svg.ts';
import { pictureSvgText } from '#drawing/picture/picture-svg.ts';
import { sheetPicture } from '#drawing/picture/sheet-picture.ts';
import type { Theme } from '#drawing/theme/tokens.ts';
import { themes } from '#drawing/theme/tokens.ts';
import { demoDesign } from '../../../seeds/demo-designs/demo-design.ts';

const design = demoDesign('planted-faults');
const svgOf = (of: Design, look: Theme = 'paper', options: PictureSvgOptions = {}): string =>
  pictureSvgText(sheetPicture(of, { look, tunnelSegments: tunnelSegments(indexNetwork(of)) }), options);
const read = (text: string): Document => new DOMParser().parseFromString(text, 'image/svg+xml');

describe('a picture as SVG', () => {
  it.each(themes)('in %s is well-formed and needs nothing from outside', (look) => {
    const text = svgOf(design, look, { fonts: [{ weight: 400, url: 'data:font/woff2;base64,AAAA' }] });
    const document = read(text);
    expect(document.querySelector('parsererror')).toBeNull();
    expect(text).not.toMatch(/var\(--|undefined|NaN/);
    expect(document.querySelectorAll('script, image, use, foreignObject, a')).toHaveLength(0);
    for (const element of document.querySelectorAll('*'))
      for (const { name, value } of element.attributes)
        if (name !== 'xmlns') expect(value, name).not.toMatch(/^\w+:|href|url\(/);
    for (const [, url] of text.matchAll(/url\(&quot;([^&]*)/g)) expect(url).toMatch(/^data:/);
  });

  it('is as large as the sheet’s paper, or as another that is asked for', () => {
    const root = read(svgOf(design)).documentElement;
    expect([root.getAttribute('width'), root.getAttribute('height')]).toEqual(['420mm', '297mm']);
    const [, , width, height] = root.getAttribute('viewBox')!.split(' ').map(Number);
    expect(width! / height!).toBeCloseTo(1280 / 905, 4);
    expect(read(svgOf(design, 'print', { paper: 'A4' })).documentElement.getAttribute('width')).toBe('297mm');
  });

  it('keeps text as text, its rims under it and out of the way of readers', () => {
    const texts = [...read(svgOf(design)).querySelectorAll('text')];
    expect(texts.filter((text) => text.hasAttribute('paint-order'))).toEqual([]);
    const address = texts.filter((text) => text.textContent === '10.255.0.13');
    expect(address.map((text) => text.getAttribute('aria-hidden'))).toEqual(['true', null]);
    expect(address[0]!.getAttribute('stroke')).not.toBeNull();
    expect(address[1]!.getAttribute('stroke')).toBeNull();
  });

  it('embeds the fonts it is given, and lets no address out of its rule', () => {
    const text = svgOf(design, 'paper', {
      fonts: [
        { weight: 400, url: 'data:font/woff2;base64,AAAA', unicodeRange: 'U+0-FF' },
        { weight: 600, url: 'x")}</style><script>', unicodeRange: 'U+0}</style><script>' },
      ],
    });
    expect(text).toContain(
      'font-weight:400;src:url(&quot;data:font/woff2;base64,AAAA&quot;);unicode-range:U+0-FF',
    );
    expect(read(text).querySelector('script')).toBeNull();
  });

  it('stays well-formed whatever a design’s names contain', () => {
    const hostile = `<b>&"']]>--\u0000\ud800`;
    const named: Design = { ...design, meta: { ...design.meta, title: hostile, createdBy: hostile } };
    const document = read(svgOf(named));
    expect(document.querySelector('parsererror')).toBeNull();
    expect(document.querySelector('b')).toBeNull();
    expect(document.querySelector('title')?.textContent).toContain(`<b>&"']]>--`);
  });
});
