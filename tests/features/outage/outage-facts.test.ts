import { describe, expect, test } from 'vitest';
import type { Design, ElementRef } from '../../../src/engine/model/design.ts';
import { indexNetwork } from '../../../src/engine/network/index-network.ts';
import {
  failableAt,
  failedName,
  failedText,
  readFailed,
  toggled,
} from '../../../src/features/outage/failable.ts';
import { failureRun } from '../../../src/features/outage/failure-run.ts';
import type { Progress } from '../../../src/lib/worker-run.ts';
import { outageDecorations } from '../../../src/features/outage/outage-decorations.ts';
import {
  outageFacts,
  outageSentence,
  partedRows,
  singlesSentence,
  siteRows,
} from '../../../src/features/outage/outage-facts.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';

const demo = terminalsStretch('Terminals stretch', 'SMF-L2-004');
const hub = hubDesign(2, { segments: ['a', 'b'] });
const spoke: ElementRef = { collection: 'tunnels', id: 'tn-s0-s1-a' };
const factsOf = (design: Design, ...failed: readonly ElementRef[]) =>
  outageFacts(indexNetwork(design), failed)!;

describe('what has failed, in the address', () => {
  const failed: readonly ElementRef[] = [
    { collection: 'devices', id: 'fw-ho', member: 2 },
    { collection: 'devices', id: 'fw-ho', port: 'wan1', member: 1 },
    { collection: 'links', id: 'ld-ho-coast' },
  ];

  test('reads back as it was', () => {
    expect(readFailed(demo, failedText(failed))).toEqual({ failed, unknown: [] });
  });

  test('keeps what it doesn’t know apart, whether it is gone, can’t fail or is no element at all', () => {
    expect(readFailed(demo, 'devices/fw-gone,segments/a,devices/fw-gul@2,<script>,sites/ho')).toEqual({
      failed: [{ collection: 'sites', id: 'ho' }],
      unknown: ['devices/fw-gone', 'segments/a', 'devices/fw-gul@2', '<script>'],
    });
  });

  test('a second press restores', () => {
    const [first, ...others] = failed;
    expect(toggled(failed, first!)).toEqual(others);
    expect(toggled(others, first!)).toEqual([...others, first]);
  });

  test('members are called by their own name', () => {
    expect(failed.slice(0, 2).map((ref) => failedName(demo, ref))).toEqual(['fw-ho-2', 'fw-ho-1 wan1']);
  });
});

test('a press on a ring fails its device, one on a segment nothing', () => {
  expect(failableAt(demo, { collection: 'endpoints', id: 'lo-ho' })).toEqual({
    collection: 'devices',
    id: 'fw-ho',
  });
  expect(failableAt(demo, { collection: 'segments', id: 'a' })).toBeUndefined();
});

describe('what comes of failures', () => {
  test('is told in one sentence', () => {
    expect(outageSentence(factsOf(hub))).toBe('Nobody is parted.');
    expect(outageSentence(factsOf(hub, spoke))).toBe('2 pairs of hosts parted in 1 segment.');
    expect(outageSentence(factsOf(demo, { collection: 'devices', id: 'fw-ho', member: 1 }))).toBe(
      '1 pair changed over. Nobody is parted.',
    );
    expect(outageSentence(factsOf(hub, { collection: 'sites', id: 's1' }))).toBe(
      '2 hosts out of service. Of the others nobody is parted.',
    );
  });

  test('names which hosts no longer reach which', () => {
    expect(
      partedRows(hub, factsOf(hub, spoke).outage).map(({ from, to, ways, letter }) => [
        letter,
        from,
        to,
        ways,
      ]),
    ).toEqual([
      ['A', 'h-s0-a', 'h-s1-a', 'both ways'],
      ['A', 'h-s1-a', 'h-s2-a', 'both ways'],
    ]);
  });

  test('stands site by site', () => {
    const rows = siteRows(hub, factsOf(hub, spoke).reach);
    expect(rows.map(({ site, lostPairs, reach }) => [site, lostPairs, reach.get('a')?.reach])).toEqual([
      ['s0', 1, 'partly'],
      ['s1', 2, 'parted'],
      ['s2', 1, 'partly'],
    ]);
  });
});

describe('an outage on the sheet', () => {
  test('shows what failed and what went with it, hosts that lost somebody, and the others dimmed', () => {
    const failed: readonly ElementRef[] = [{ collection: 'associations', id: 'as-s0-s1' }];
    const { tones, tags, balloons } = outageDecorations(
      pairDesign(),
      failed,
      factsOf(pairDesign(), ...failed),
    );
    expect(tones).toMatchObject({
      'associations/as-s0-s1': ['failed'],
      'tunnels/tn-s0-s1-a': ['failed'],
      'devices/h-s0-a': ['lit'],
      'devices/h-s1-a': ['lit'],
    });
    expect(tags?.map(({ at, text }) => `${at.id} ${text}`)).toEqual(['h-s0-a cut off', 'h-s1-a cut off']);
    expect(balloons).toEqual([]);
    const { tones: some, tags: told } = outageDecorations(hub, [spoke], factsOf(hub, spoke));
    expect(some?.['devices/h-s1-b']).toEqual(['dimmed']);
    expect(told?.find(({ at }) => at.id === 'h-s2-a')).toMatchObject({ text: 'lost 1', strong: false });
  });

  test('marks nothing while nothing has failed', () => {
    const { tones, tags } = outageDecorations(hub, [], factsOf(hub));
    expect([tones, tags]).toEqual([undefined, undefined]);
  });
});

describe('a run over failures', () => {
  const run = (kind: 'singles' | 'pairs') => {
    const steps: Progress[] = [];
    const going = failureRun(demo, kind);
    for (let step = going.next(); ; step = going.next()) {
      if (step.done === true) return { steps, result: step.value };
      steps.push(step.value);
    }
  };

  test('tells how far it is and ranks every single failure by its harm', () => {
    const { steps, result } = run('singles');
    expect(steps).toEqual(steps.map((_step, done) => ({ done, total: steps.length })));
    const singles = result as Extract<typeof result, readonly { pairCount?: number }[]>;
    expect(singles).toHaveLength(steps.length);
    const harm = (singles as readonly { readonly pairCount: number }[]).map(({ pairCount }) => pairCount);
    expect(harm).toEqual([...harm].sort((x, y) => y - x));
    expect(singles[0]).toMatchObject({ element: { collection: 'transports', id: 'coast' }, cutOff: 8 });
  });

  test('over pairs says what it tried and finds both members of the pair', () => {
    const { steps, result } = run('pairs');
    expect(result).toMatchObject({ tried: steps.length });
    expect(result).toHaveProperty('pairs.0.elements', [
      { collection: 'devices', id: 'fw-ho', member: 1 },
      { collection: 'devices', id: 'fw-ho', member: 2 },
    ]);
  });

  test('that harms nobody says what was tried', () => {
    const single = { cutOff: 0, gone: 0, tunnelsDown: 0, segments: [], element: spoke };
    expect(singlesSentence([{ ...single, pairCount: 0 }])).toBe(
      'Nothing parts when any one thing fails: all 1 tried.',
    );
    expect(
      singlesSentence([
        { ...single, pairCount: 3 },
        { ...single, pairCount: 0 },
      ]),
    ).toBe('1 of 2 things part hosts when they fail alone.');
  });
});
