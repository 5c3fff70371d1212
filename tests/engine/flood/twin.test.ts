import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { reach } from '#engine/flood/reach.ts';
import { removalPatch } from '#engine/flood/removal-patch.ts';
import { segmentReach } from '#engine/flood/segment-reach.ts';
import { suggestCuts } from '#engine/flood/suggest-cuts.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { bruteForceFlood } from '../../support/brute-force-flood.ts';
import { generatedDesign, generatedVlans } from '../../support/generated-designs.ts';

const hostsOf = (design: Design): readonly string[] =>
  Object.keys(design.devices).filter((id) => design.devices[id]!.kind === 'host');
const runs = { numRuns: 150 };

describe('the flood graph and copies that walk the design', () => {
  it('agree on which hosts a broadcast reaches, in how many copies, and where it never ends', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const network = indexNetwork(design);
        const twin = bruteForceFlood(design);
        for (const host of hostsOf(design)) {
          const walked = twin.fromHost(host);
          const found = reach(network, { host });
          expect(found.storm).toBe(walked.storm);
          const copies = found.deliveries.map(({ host: to, copies: count }) => [to, count]);
          if (!walked.storm) expect(Object.fromEntries(copies)).toEqual(Object.fromEntries(walked.copies));
        }
      }),
      runs,
    );
  }, 60_000);

  it('agree on whether the design allows a storm at all', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const storms = findStorms(floodGraph(indexNetwork(design)));
        const ofArp = storms.filter(({ frames }) => frames.includes('arp'));
        expect(ofArp.length > 0).toBe(bruteForceFlood(design).canStorm(generatedVlans));
      }),
      runs,
    );
  }, 60_000);
});

describe('what rests on the flood graph', () => {
  it('parts exactly those hosts of a segment that a broadcast does not reach', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const network = indexNetwork(design);
        const heardFrom = new Map(
          hostsOf(design).map((host) => [
            host,
            new Set(reach(network, { host }).deliveries.map(({ host: to }) => to)),
          ]),
        );
        for (const segment of Object.keys(design.segments)) {
          const { groups, partings } = segmentReach(network, segment);
          groups.forEach((own, from) =>
            groups.forEach((other, to) => {
              const isParted = partings.some((parting) => parting.from === from && parting.to === to);
              for (const a of own.points)
                for (const b of other.points)
                  if (a.port === undefined && b.port === undefined && a.device !== b.device)
                    expect(heardFrom.get(a.device)!.has(b.device)).toBe(!isParted);
            }),
          );
        }
      }),
      runs,
    );
  }, 60_000);

  it('finds no storm where its suggested cuts were made', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const network = indexNetwork(design);
        for (const storm of findStorms(floodGraph(network))) {
          const cut = applyPatch(network.design, removalPatch(network, suggestCuts(network, storm)));
          const concerned = new Set([...storm.tunnels, ...storm.cables]);
          const left = findStorms(floodGraph(indexNetwork(cut))).flatMap(({ tunnels, cables }) => [
            ...tunnels,
            ...cables,
          ]);
          expect(left.filter((id) => concerned.has(id))).toEqual([]);
        }
      }),
      runs,
    );
  }, 60_000);
});
