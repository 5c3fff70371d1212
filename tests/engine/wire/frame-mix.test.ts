import { describe, expect, it } from 'vitest';
import { frameMixFromLetters } from '#engine/wire/frame-mix.ts';

describe('a mix written in letters', () => {
  it('counts each letter, in order of size, as IP packets', () => {
    expect(frameMixFromLetters('gaaaaaaadddd', 1500)).toEqual({
      ok: true,
      mix: [
        { ipBytes: 46, weight: 7 },
        { ipBytes: 494, weight: 4 },
        { ipBytes: 1500, weight: 1 },
      ],
    });
  });

  it('takes z for a packet as long as the MTU', () => {
    expect(frameMixFromLetters('zzg', 1396)).toMatchObject({
      mix: [
        { ipBytes: 1396, weight: 2 },
        { ipBytes: 1500, weight: 1 },
      ],
    });
    expect(frameMixFromLetters('zg', 1500)).toMatchObject({ mix: [{ ipBytes: 1500, weight: 2 }] });
  });

  it('refuses letters without a size, no letters at all and an MTU that is none', () => {
    expect(frameMixFromLetters('akA', 1500)).toMatchObject({
      ok: false,
      problems: [
        { field: 'letters', value: 'k' },
        { field: 'letters', value: 'A' },
      ],
    });
    expect(frameMixFromLetters('', 1500)).toMatchObject({
      ok: false,
      problems: [{ field: 'letters', value: '' }],
    });
    expect(frameMixFromLetters('z', 0)).toMatchObject({
      ok: false,
      problems: [{ field: 'mtuBytes', value: 0 }],
    });
  });
});
