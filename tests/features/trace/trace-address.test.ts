import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import {
  readQuestion,
  textsIn,
  variedName,
  variedTexts,
  writeQuestion,
  writeVariation,
} from '../../../src/features/trace/trace-address.ts';
import { questionFields, type TraceQuestion } from '../../../src/features/trace/trace-question.ts';
import { sends } from '../../../src/features/trace/trace-sends.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';

const design = pairDesign({ hub: 'ha-pair' });
const read = (texts: Parameters<typeof readQuestion>[1], of: Design = design) => readQuestion(of, texts);

describe('the address', () => {
  it('holds a whole probe, and gives it back as it was', () => {
    const sources = [
      { host: 'h-s0-a' },
      { device: 'sw-s1', port: 'p1' },
      { device: 'fw-s0', port: 'lan1', member: 2 as const },
    ];
    const question = fc.record(
      {
        from: fc.constantFrom(...sources),
        to: fc.constant('h-s1-a'),
        send: fc.constantFrom('ping', 'tcp-full-size', 'certificate-exchange', 'bfd'),
        version: fc.constantFrom('ipv4' as const, 'ipv6' as const),
        bytes: fc.integer({ min: 20, max: 65_535 }),
        dontFragment: fc.boolean(),
        hopLimit: fc.integer({ min: 1, max: 255 }),
        tags: fc.array(fc.integer({ min: 1, max: 4094 }), { maxLength: 2 }),
        isLearned: fc.boolean(),
      },
      { requiredKeys: ['send'] },
    );
    fc.assert(
      fc.property(question, (asked: TraceQuestion) => {
        const params = new URLSearchParams(writeQuestion(asked));
        const texts = textsIn((name) => params.get(name) ?? '');
        expect(readQuestion(design, texts)).toEqual({ question: asked, problems: [] });
      }),
    );
  });

  it('is short and can be read', () => {
    const texts = writeQuestion({
      from: { device: 'fw-s0', port: 'lan1', member: 2 },
      to: 'h-s1-a',
      send: 'tcp-full-size',
      bytes: 1500,
      dontFragment: false,
      tags: [200, 110],
    });
    const set = Object.fromEntries(Object.entries(texts).filter(([, text]) => text !== ''));
    expect(set).toEqual({
      from: 'fw-s0/lan1@2',
      to: 'h-s1-a',
      send: 'tcp-full-size',
      bytes: '1500',
      df: 'no',
      tags: '200-110',
    });
  });

  it('takes a device’s name for its id where no other has it', () => {
    const named = applyPatch(design, { devices: { 'h-s0-a': { name: 'till' } } });
    expect(read({ from: 'till' }, named).question.from).toEqual({ host: 'h-s0-a' });
    const twice = applyPatch(named, { devices: { 'h-s1-a': { name: 'till' } } });
    expect(read({ from: 'till' }, twice).problems).toMatchObject([{ field: 'from', value: 'till' }]);
  });

  it.each([
    ['from', 'nobody', 'a host of this design'],
    ['from', 'sw-s0', 'a port as device/port'],
    ['from', 'sw-s0/p99', 'removed or renamed'],
    ['to', 'fw-s1', 'a host of this design'],
    ['send', 'carrier-pigeon', 'ping'],
    ['ip', '5', '4 or 6'],
    ['bytes', '12e3', 'whole number'],
    ['bytes', '99999999', 'whole number'],
    ['df', 'maybe', 'yes or no'],
    ['ttl', '-1', '1 to 255'],
    ['tags', '110;20', 'one VLAN'],
    ['far', 'away', 'learned or unknown'],
  ] as const)('names what is wrong with %s = %s', (field, value, expected) => {
    const { problems } = read({ [field]: value });
    expect(problems).toEqual([{ field, value, expected: expect.stringContaining(expected) as string }]);
  });

  it('names an IP version that a send doesn’t have', () => {
    expect(read({ send: 'igmp', ip: '6' }).problems).toEqual([
      { field: 'ip', value: '6', expected: '4: IGMP report has no other' },
    ]);
  });

  it('never throws, whatever stands in it', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.constantFrom(...questionFields), fc.string(), { maxKeys: 9 }), (texts) => {
        const { problems } = read(texts);
        for (const { field, value, expected } of problems) {
          expect(value).toBe(texts[field]);
          expect(expected).not.toBe('');
        }
      }),
    );
  });

  it('says that a source is gone once it is deleted', () => {
    const hub = hubDesign(1);
    const without = applyPatch(hub, { devices: { 'h-s1-a': null } });
    expect(read({ from: 'h-s1-a' }, hub).problems).toEqual([]);
    expect(read({ from: 'h-s1-a' }, without).problems).toMatchObject([{ field: 'from', value: 'h-s1-a' }]);
  });

  it('knows every send by its id', () => {
    for (const { id } of sends) expect(read({ send: id }).question.send).toBe(id);
  });
});

describe('the second probe', () => {
  const first: TraceQuestion = { from: { host: 'h-s0-a' }, to: 'h-s1-a', send: 'ping', bytes: 1500 };
  const second: TraceQuestion = { ...first, bytes: 1396, dontFragment: true };

  it('stands in the address only with what is different, and follows the first in all else', () => {
    const written = writeVariation(first, second);
    expect(Object.entries(written).filter(([, text]) => text !== '')).toEqual([
      [variedName('bytes'), '1396'],
      [variedName('df'), 'yes'],
    ]);
    const valueOf = (name: string): string =>
      ({ ...writeQuestion({ ...first, to: undefined }), to: 'h-s1-a', ...written })[name] ?? '';
    expect(read(variedTexts(valueOf)!).question).toEqual(second);
  });

  it('is none where nothing is different', () => {
    expect(variedTexts(() => '')).toBeUndefined();
    expect(Object.values(writeVariation(first, first)).every((text) => text === '')).toBe(true);
    expect(Object.values(writeVariation(first, undefined)).every((text) => text === '')).toBe(true);
  });
});
