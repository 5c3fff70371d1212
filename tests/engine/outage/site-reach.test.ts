import { describe, expect, it } from 'vitest';
import type { Design, ElementRef } from '#engine/model/design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { outage } from '#engine/outage/outage.ts';
import { pairCandidates, pairOfFailures, partedBy } from '#engine/outage/pairs-of-failures.ts';
import { siteReach } from '#engine/outage/site-reach.ts';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { hubDesign } from '../../support/designs.ts';

const reachAfter = (design: Design, ...failed: readonly ElementRef[]): readonly string[] => {
  const answer = outage(design, failed, { pairs: true });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return siteReach(indexNetwork(design), answer).map(
    ({ segment, site, reach, lostPairs, pairs }) => `${segment} ${site} ${reach} ${lostPairs}/${pairs}`,
  );
};

describe('what a site still reaches', () => {
  const hub = hubDesign(2, { segments: ['a', 'b'] });

  it('is everything while nothing has failed', () => {
    expect(reachAfter(hub)).toEqual([
      'a s0 reaches 0/2',
      'a s1 reaches 0/2',
      'a s2 reaches 0/2',
      'b s0 reaches 0/2',
      'b s1 reaches 0/2',
      'b s2 reaches 0/2',
    ]);
  });

  it('is nothing at a spoke without its tunnel, and part of it elsewhere, on that segment only', () => {
    expect(reachAfter(hub, { collection: 'tunnels', id: 'tn-s0-s1-a' })).toEqual([
      'a s0 partly 1/2',
      'a s1 parted 2/2',
      'a s2 partly 1/2',
      'b s0 reaches 0/2',
      'b s1 reaches 0/2',
      'b s2 reaches 0/2',
    ]);
  });

  it('is not asked of a site that is out of service, nor missed at the others', () => {
    expect(reachAfter(hub, { collection: 'sites', id: 's1' }).filter((line) => line.startsWith('a'))).toEqual(
      ['a s0 reaches 0/1', 'a s1 out-of-service 0/0', 'a s2 reaches 0/1'],
    );
  });
});

describe('pairs of failures', () => {
  const network = indexNetwork(terminalsStretch('Terminals stretch', 'SMF-L2-004'));
  const members = [1, 2].map((member) => ({ collection: 'devices', id: 'fw-ho', member }) as ElementRef) as [
    ElementRef,
    ElementRef,
  ];

  it('find what hides behind a spare: both members of a pair part what neither does alone', () => {
    const alone = members.map((member) => partedBy(network, [member])) as [number, number];
    expect(alone).toEqual([0, 0]);
    expect(pairOfFailures(network, members, alone)).toMatchObject({ elements: members, alone: [0, 0] });
    expect(pairOfFailures(network, members, alone)!.pairCount).toBeGreaterThan(0);
  });

  it('leave out two that part no more together than added up', () => {
    const two = [
      { collection: 'tunnels', id: 'tn-ho-gul-a' },
      { collection: 'tunnels', id: 'tn-ho-gul-b' },
    ] as const;
    const alone = two.map((one) => partedBy(network, [one])) as [number, number];
    expect(alone.every((count) => count > 0)).toBe(true);
    expect(pairOfFailures(network, two, alone)).toBeUndefined();
  });

  it('are bounded, and those on which most hangs are tried first', () => {
    const all = pairCandidates(network, 1_000_000);
    expect(all.elements).toHaveLength(all.considered);
    const few = pairCandidates(network, 45);
    expect(few.elements).toHaveLength(10);
    expect(few.considered).toBe(all.considered);
    expect(few.elements.slice(0, 4)).toEqual([
      { collection: 'transports', id: 'coast' },
      { collection: 'transports', id: 'ring' },
      ...members,
    ]);
  });
});
