import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { everySingleFailure } from '#engine/outage/every-single-failure.ts';
import { outage } from '#engine/outage/outage.ts';
import { smallestSegmentCuts } from '#engine/outage/smallest-segment-cuts.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { generatedDesign } from '../../support/generated-designs.ts';

const cuts = (design: Design) =>
  smallestSegmentCuts(design).map(({ segment, elements, pairCount }) => [
    segment,
    elements.map(({ id }) => id),
    pairCount,
  ]);

describe('the smallest cut of a segment', () => {
  it('is one element where there is one way', () => {
    const [[segment, elements, pairCount]] = cuts(pairDesign()) as [[string, string[], number]];
    expect([segment, elements.length, pairCount]).toEqual(['a', 1, 1]);
  });

  it('is as many as there are ways side by side', () => {
    // Two uplinks of the head office's pair lead to one tunnel; a mesh that relays has two ways to each site but one uplink.
    expect(cuts(hubDesign(1, { hub: 'ha-pair' }))[0]![1]).toHaveLength(1);
    const second = (site: string) => ({
      [`cb-${site}-more`]: {
        kind: 'cable' as const,
        a: { device: `sw-${site}`, port: 'p1b' },
        b: { device: `fw-${site}`, port: 'lan1b' },
      },
    });
    const ports = (device: string, port: string) => ({
      [device]: {
        ports: {
          [port]: { aggregation: 'up' },
          [`${port}b`]: {
            number: 50,
            role: 'lan' as const,
            mode: 'trunk' as const,
            allowedVlans: [110],
            aggregation: 'up',
          },
        },
      },
    });
    const doubled = applyPatch(meshDesign(3), {
      devices: Object.assign(
        {},
        ...['s0', 's1', 's2'].flatMap((site) => [ports(`sw-${site}`, 'p1'), ports(`fw-${site}`, 'lan1')]),
      ) as object as Record<string, never>,
      links: { ...second('s0'), ...second('s1'), ...second('s2') },
    });
    const [[, elements, pairCount]] = cuts(doubled) as [[string, string[], number]];
    expect(elements).toHaveLength(2);
    expect(pairCount).toBe(2);
  });

  it('is none where hosts share a switch, and none without a pair', () => {
    const alone = applyPatch(pairDesign({ hostsPerSite: 2 }), {
      tunnels: { 'tn-s0-s1-a': { b: { vni: 9 } } },
    });
    expect(cuts(alone)).toEqual([]);
    expect(
      cuts(
        applyPatch(pairDesign(), {
          segments: { a: { sites: { s1: null } } },
          devices: { 'h-s1-a': null },
          links: { 'cb-h-s1-a': null },
        }),
      ),
    ).toEqual([]);
  });

  it('parts its segment, and is no larger than a single failure that does, in any design', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const singles = everySingleFailure(design).filter(({ element }) => element.collection === 'tunnels');
        const found = smallestSegmentCuts(design);
        for (const { segment, elements, pairCount } of found) {
          const answer = outage(design, elements);
          expect(answer.ok && answer.segments.find((one) => one.segment === segment)!.pairCount).toBe(
            pairCount,
          );
          expect(pairCount).toBeGreaterThan(0);
          for (const single of singles) {
            const first = single.segments.find((one) => one.segment === segment);
            // One that parts the first point from some other is a cut of size one.
            if (first?.cutOff.some(({ device }) => device === `h-s0-${segment}`) === true)
              expect(elements).toHaveLength(1);
          }
        }
      }),
      { numRuns: 150 },
    );
  }, 60_000);
});
