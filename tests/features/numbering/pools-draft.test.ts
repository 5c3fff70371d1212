import { describe, expect, it } from 'vitest';
import { noPools, type Pools } from '../../../src/contract/numbering.ts';
import {
  addLine,
  changeLine,
  draftOf,
  readDraft,
  removeLine,
} from '../../../src/features/numbering/pools-draft.ts';

const pools: Pools = {
  ...noPools,
  vnis: [{ from: 10_001, to: 19_999, for: 'tunnels' }],
  loopbacks: [{ prefix: '10.255.0.0/16' }],
  reserved: {
    vnis: [],
    vlans: [{ from: 200, to: 209 }],
    networks: [{ prefix: '10.255.9.0/24', for: 'later' }],
  },
};

describe('pools as they are typed', () => {
  it('what is kept reads back as it was, and lines with nothing in them do not count', () => {
    expect(readDraft(draftOf(pools))).toEqual({ ok: true, pools });
    expect(readDraft(addLine(addLine(draftOf(pools), 'vlans'), 'networksInUse'))).toEqual({
      ok: true,
      pools,
    });
    expect(readDraft(removeLine(draftOf(pools), 'vnis', 0))).toEqual({
      ok: true,
      pools: { ...pools, vnis: [] },
    });
  });

  it('a bad value names the field, what was typed and the way out, at its own line', () => {
    const blankFirst = addLine({ ...draftOf(pools), vnis: [] }, 'vnis');
    const typed = changeLine(addLine(blankFirst, 'vnis'), 'vnis', 1, { from: '10 001', to: '99999999' });
    const read = readDraft(typed);
    expect(read.ok).toBe(false);
    if (read.ok) return;
    expect(read.problems['vnis.1.from']).toMatch(/^From 10 001 does not fit: type /);
    expect(read.problems['vnis.1.to']).toMatch(/^To 99999999 does not fit: type .*16,?777,?215/);
    expect(Object.keys(read.problems)).toHaveLength(2);
  });

  it('a range that ends before it begins and a prefix that is none are refused', () => {
    const draft = changeLine(draftOf(pools), 'vnis', 0, { from: '20000', to: '10000' });
    expect(readDraft(changeLine(draft, 'loopbacks', 0, { prefix: '10.255.0.0' }))).toMatchObject({
      ok: false,
      problems: {
        'vnis.0.to': 'To 10000 does not fit: type a range that ends no lower than it begins.',
        'loopbacks.0.prefix': expect.stringMatching(/^Prefix 10\.255\.0\.0 does not fit: type /) as string,
      },
    });
  });
});
