// @vitest-environment jsdom
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { group, shape } from '#drawing/shape.ts';
import { toSvgText } from '#drawing/svg/to-svg-text.ts';
import { paint } from '#drawing/theme/paint.ts';

const parsed = (text: string): Document =>
  new DOMParser().parseFromString(`<svg xmlns="http://www.w3.org/2000/svg">${text}</svg>`, 'image/svg+xml');

describe('shapes as SVG text', () => {
  it('spells attributes as SVG does and leaves undefined ones out', () => {
    expect(
      toSvgText([
        shape('path', {
          d: 'M0 0',
          strokeWidth: 2,
          strokeDasharray: undefined,
          className: 'cut',
          paintOrder: 'stroke',
        }),
      ]),
    ).toBe('<path d="M0 0" stroke-width="2" class="cut" paint-order="stroke"/>');
  });

  it('writes a theme in, so that no custom property is left', () => {
    const shapes = [shape('rect', { fill: paint('ink'), stroke: 'var(--seg-b)' })];
    expect(toSvgText(shapes, 'paper')).toBe('<rect fill="#17232b" stroke="#e69f00"/>');
    expect(toSvgText(shapes, 'slate')).toBe('<rect fill="#e9ece6" stroke="#e69f00"/>');
    expect(toSvgText(shapes)).toContain('var(--ink)');
  });

  it('stays well-formed and keeps its meaning, whatever names contain', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary', maxLength: 40 }), (name) => {
        const document = parsed(toSvgText([group([shape('text', { id: name }, [name])])], 'paper'));
        const text = document.querySelector('text');
        // XML 1.0, 2.11: a carriage return is read back as a line feed; characters it forbids become U+FFFD.
        const readable = name
          .replace(/\r\n?/g, '\n')
          // eslint-disable-next-line no-control-regex
          .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g, '\ufffd')
          .replace(/[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g, '\ufffd');
        expect(text?.textContent).toBe(readable);
      }),
    );
  });

  it('cannot be made to hold another element by a name', () => {
    const text = toSvgText([shape('text', { id: '"><script>' }, ['</text><script>alert(1)</script>'])]);
    expect(parsed(text).querySelector('script')).toBeNull();
  });
});
