import { describe, expect, test } from 'vitest';
import type { LoadReport } from '../../../src/engine/load/load-of.ts';
import { loadOfNetwork } from '../../../src/engine/load/load-of.ts';
import type { Design } from '../../../src/engine/model/design.ts';
import { applyPatch, type MergePatch } from '../../../src/engine/model/merge-patch.ts';
import { indexNetwork } from '../../../src/engine/network/index-network.ts';
import { demandWayRows } from '../../../src/features/load/demand-ways.ts';
import { limitParts } from '../../../src/features/load/limit-parts.ts';
import { limitRows } from '../../../src/features/load/limit-rows.ts';
import { roomWords } from '../../../src/features/load/limit-words.ts';
import { loadDecorations } from '../../../src/features/load/load-decorations.ts';
import { loadVerdict } from '../../../src/features/load/load-verdict.ts';
import { pairDesign } from '../../support/designs.ts';

const full = [{ packetBytes: 1396, weight: 1 }];
const demands: MergePatch = {
  demands: {
    d: {
      name: 'Ticket sales',
      segment: 'a',
      from: { host: 'h-s0-a' },
      to: { host: 'h-s1-a' },
      forwardBps: 100_000_000,
      reverseBps: 10_000_000,
      mix: full,
      flows: 4,
      latencyAllowedUs: 1_000,
    },
    e: {
      segment: 'a',
      from: { site: 's0' },
      to: { site: 's1' },
      forwardBps: 20_000_000,
      reverseBps: 1,
      mix: full,
    },
    untold: { segment: 'a', from: { site: 's0' }, to: { site: 's1' } },
  },
};
const profile: MergePatch = {
  profiles: {
    small: {
      name: 'Small gateway',
      encrypted: { oneFlowBps: 460_000_000, manyFlowsBps: 2_000_000_000, packetsPerSecond: 400_000 },
    },
  },
  devices: { 'fw-s0': { profile: 'small' } },
  links: { 'ld-s0-coast': { rateUpBps: 150_000_000 } },
};
const worked = (...patches: readonly MergePatch[]) => {
  const design = [demands, ...patches].reduce<Design>(applyPatch, pairDesign());
  const network = indexNetwork(design);
  const report = loadOfNetwork(network);
  if (!report.ok) throw new Error(JSON.stringify(report.problems));
  return { design, network, report: report as LoadReport, rows: limitRows(network, report, design) };
};

describe('limits as rows', () => {
  test('begin with the fullest and end with those that nobody knows, which are not said to be zero', () => {
    const { rows } = worked(profile);
    const shares = rows.map(({ sharePerMillion }) => sharePerMillion);
    const known = shares.filter((share) => share !== undefined);
    expect(known).toEqual([...known].sort((x, y) => y - x));
    expect(shares.slice(known.length).every((share) => share === undefined)).toBe(true);
    const unknown = rows.find(({ key }) => key === 'devices fw-s1 encrypted gateway-rate')!;
    expect(unknown.most).toBeUndefined();
    expect(roomWords(unknown)).toBe('not known');
  });

  test('hold one flow, many flows and packets per second of a gateway apart', () => {
    const { rows } = worked(profile);
    const at = rows.filter(({ name, group }) => name === 'fw-s0' && group === 'gateways');
    expect(at.map(({ what }) => what).sort()).toEqual([
      'many flows, encrypted',
      'one flow, encrypted',
      'packets/s, encrypted',
    ]);
    expect(at.find(({ what }) => what.startsWith('one flow'))?.used).toBe(25_000_000);
  });

  test('give a tunnel the tightest limit on its way, and its own part of it', () => {
    const { rows, report } = worked(profile);
    const tunnel = rows.find(({ group, way }) => group === 'tunnels' && way === 'towards fw-s1')!;
    expect(tunnel.limit?.key).toBe('links ld-s0-coast out');
    const landing = report.limits.find(({ limit }) => limit.key === 'links ld-s0-coast out')!;
    expect(tunnel.used).toBe(landing.used);
    expect(tunnel.own).toBe(landing.used);
  });

  test('say that nothing is known where no demand could be counted', () => {
    const { rows } = worked({ demands: { d: null, e: null } });
    expect(rows.length).toBeGreaterThan(0);
    expect(rows.every(({ used, uncounted }) => used === undefined && uncounted.length === 1)).toBe(true);
  });

  test('every limit is the sum of its parts, but one flow is the fullest of them', () => {
    const { network, report } = worked(profile);
    for (const { limit, used } of report.limits) {
      const parts = limitParts(network, report, limit.key);
      const figures = parts.map(({ load, measure }) => load?.[measure] ?? 0);
      if (limit.kind === 'gateway-one-flow') expect(Math.max(...figures)).toBeGreaterThanOrEqual(used);
      else expect(figures.reduce((sum, figure) => sum + figure, 0)).toBe(used);
    }
  });
});

describe('the verdict on the load', () => {
  test('names the first bottleneck with its headroom, and what it leaves out', () => {
    const { report, rows, design } = worked(profile);
    const verdict = loadVerdict(report, rows, design);
    expect(verdict).toEqual({
      state: 'room',
      sentence:
        'The rate ordered for fw-s0 wan1 on Coastal access, out, fills first: 86 % of 150 Mbit/s is used, room for 1.1 times this.',
      besides: '6 limits not known, 2 demands not counted in full.',
    });
  });

  test('says by how much is asked too much', () => {
    const { report, rows, design } = worked(profile, { links: { 'ld-s0-coast': { rateUpBps: 50_000_000 } } });
    const { state, sentence } = loadVerdict(report, rows, design);
    expect(state).toBe('over');
    expect(sentence).toMatch(/is asked for 129 Mbit\/s and has 50 Mbit\/s: only 38 % of this fits\./);
  });

  test('says what is missing where nothing can be counted', () => {
    const { report, rows, design } = worked({ demands: { d: null, e: null } });
    expect(loadVerdict(report, rows, design)).toMatchObject({
      state: 'unknown',
      sentence: 'Nothing can be counted yet: a demand needs its rate and its frame mix.',
    });
  });
});

describe('load on the sheet', () => {
  test('is a tag on what is used most, the bottleneck’s in full ink and named, and none of the findings’ marks', () => {
    const { report, rows } = worked(profile);
    const { tags, balloons, tones } = loadDecorations(rows, report.bottleneck?.limit.key, [
      { collection: 'devices', id: 'fw-s0', port: 'wan1' },
    ]);
    expect(tags?.[0]).toMatchObject({ at: { id: 'ld-s0-coast' }, text: 'first full, 86 %', strong: true });
    expect(tags?.slice(1).every(({ strong }) => strong === false)).toBe(true);
    expect(new Set(tags?.map(({ at }) => `${at.collection} ${at.id} ${at.port ?? ''}`)).size).toBe(
      tags?.length,
    );
    expect(balloons).toEqual([]);
    expect(tones).toEqual({ 'devices/fw-s0': ['lit'] });
  });
});

describe('demands as rows', () => {
  test('tell both ways with path, growth, latency against what is allowed, and what holds one flow back', () => {
    const { report, design } = worked(profile);
    const [there, back] = demandWayRows(report, design);
    expect(there).toMatchObject({
      name: 'Ticket sales',
      path: 'h-s0-a › sw-s0 › fw-s0 › tn-s0-s1-a › fw-s1 › sw-s1 › h-s1-a',
      from: 'h-s0-a',
      to: 'h-s1-a',
      offeredBps: 100_000_000,
      isInTime: false,
    });
    // 1,396 B of the host become 1,500 B of ESP: see the engine's own test.
    expect(there!.growth).toBeCloseTo(1500 / 1396, 5);
    expect(back).toMatchObject({ from: 'h-s1-a', to: 'h-s0-a', way: 'reverse' });
  });

  test('say why frames don’t get there', () => {
    const { report, design } = worked({ tunnels: { 'tn-s0-s1-a': { b: { vni: 4_242 } } } });
    const [there] = demandWayRows(report, design);
    expect(there).toMatchObject({ path: 'frames do not get there', elements: [] });
    expect(there!.offeredBps).toBeUndefined();
  });

  test('name a demand without a name by where it leads', () => {
    const { report, design } = worked(profile);
    const { s0, s1 } = design.sites;
    expect(demandWayRows(report, design).map(({ name }) => name)).toContain(
      `all of ${s0!.name} to all of ${s1!.name}`,
    );
  });
});
