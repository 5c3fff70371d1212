import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { segmentReach } from '#engine/flood/segment-reach.ts';
import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import { applyPatch, inversePatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { segmentShape } from '#engine/stretch/segment-shape.ts';
import { stretch } from '#engine/stretch/stretch.ts';
import type { SitePlan, StretchForm } from '#engine/stretch/stretch-form.ts';
import type { StretchToRequest } from '#engine/stretch/stretch-to.ts';
import { stretchTo } from '#engine/stretch/stretch-to.ts';
import { formOf, stemIds, validForms } from '../../support/stretch-forms.ts';

const example = { title: 'Stretch', example: true };
const designOf = (form: StretchForm): Design => {
  const design = { ...emptyDesign('Stretch'), meta: example };
  const answer = stretch(form, { design, newId: stemIds });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return applyPatch(design, answer.patch);
};
const stretched = (design: Design, request: StretchToRequest): Design => {
  const answer = stretchTo(request, { design, newId: stemIds });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return applyPatch(design, answer.patch);
};
const problemsOf = (design: Design, request: StretchToRequest) => {
  const answer = stretchTo(request, { design, newId: stemIds });
  return answer.ok ? [] : answer.problems;
};
const told = (design: Design): readonly string[] =>
  runRules(design).map(({ rule, sentence }) => `${rule}: ${sentence}`);

const onCoast = (address: string, change: Partial<SitePlan['landings'][number]> = {}): SitePlan => ({
  key: 'new',
  name: 'Fennel Quay',
  gateway: 'firewall',
  landings: [{ transport: 'coastal-access', address, ...change }],
});
const newSite = onCoast('203.0.113.9');
const pools = { pools: { loopbacks: ['10.255.0.0/16', '2001:db8:ff::/64'] } };
const newTunnels = (before: Design, after: Design): readonly string[] =>
  Object.keys(after.tunnels).filter((id) => !Object.hasOwn(before.tunnels, id));

const twoSegments = (count: number, topology: StretchForm['topology'], filtered = false): Design =>
  designOf(
    formOf(count, {
      topology,
      segments: [
        { key: 'a', name: 'Ticketing', subnet: '10.110.0.0/22', protocols: ['ipv4'] },
        {
          key: 'b',
          name: 'CCTV',
          subnet: '10.130.0.0/23',
          protocols: ['ipv4'],
          face: 'camera',
          sites: ['s0', 's1', 's2'],
          ...(filtered ? { mustBeFiltered: true } : {}),
        },
      ],
    }),
  );

describe('a segment keeps its shape', () => {
  test('at a hub the new site is joined to the hub', () => {
    const before = twoSegments(4, { kind: 'hub', hub: 's0' });
    expect(segmentShape(before, 'b')).toMatchObject({ kind: 'hub', partners: ['ho'] });
    const after = stretched(before, { segment: 'b', site: 'ske', sampleHost: true });
    expect(newTunnels(before, after)).toEqual(['tn-ho-ske-b']);
    // The association that is there already carries it.
    expect(after.associations).toEqual(before.associations);
    expect(after.tunnels['tn-ho-ske-b']!.association).toBe('as-ho-ske');
    expect(after.segments['b']!.sites['ske']).toEqual({ vlan: 120, subnets: ['10.130.0.0/23'] });
    expect(after.devices['cctv-ske']).toMatchObject({ face: 'camera', addresses: ['10.130.0.13/23'] });
    expect(told(after)).toEqual([]);
  });

  test('in a mesh it is joined to each, in the isolation group that the others are in', () => {
    const before = twoSegments(4, { kind: 'mesh' });
    expect(segmentShape(before, 'b').kind).toBe('mesh');
    const after = stretched(before, { segment: 'b', site: 'ske', sampleHost: true });
    expect(newTunnels(before, after)).toHaveLength(3);
    const groups = Object.values(after.forwarders).flatMap(({ circuits }) =>
      Object.values(circuits).flatMap((circuit) => (circuit.kind === 'tunnel' ? [circuit.isolation] : [])),
    );
    expect(new Set(groups)).toEqual(new Set(['mesh']));
    expect(told(after)).toEqual([]);
  });

  test('along a chain a person says where, and is asked when they don’t', () => {
    const before = twoSegments(5, { kind: 'chain' });
    expect(segmentShape(before, 'a')).toMatchObject({ kind: 'other', partners: [] });
    expect(problemsOf(before, { segment: 'a', site: newSite })).toEqual([
      {
        field: 'from',
        value: undefined,
        expected: 'the site to join it to: Gullhaven, Head office, Marl, Orrin Point, Skerry',
      },
    ]);
    const after = stretched(before, { segment: 'a', site: newSite, from: 'mar', sampleHost: true });
    expect(newTunnels(before, after)).toEqual(['tn-mar-fq-a']);
    expect(told(after)).toEqual([]);
  });

  test('what is filtered stays filtered: a cross-connect that has its tunnel gets a neighbour with an uplink of its own', () => {
    const before = twoSegments(3, { kind: 'chain' }, true);
    const after = stretched(before, { segment: 'b', site: newSite, from: 'op', sampleHost: true });
    const kinds = Object.values(after.forwarders)
      .filter(({ device, name }) => device === 'fw-op' && name.startsWith('xc'))
      .map(({ kind }) => kind);
    expect(kinds).toEqual(['cross-connect', 'cross-connect']);
    const policies = Object.values(after.forwarders).flatMap(({ policy }) =>
      policy === undefined ? [] : [policy],
    );
    expect(policies).toHaveLength(6);
    expect(new Set(policies.map((policy) => JSON.stringify(policy))).size).toBe(1);
    expect(told(after)).toEqual([]);
  });
});

describe('a new site', () => {
  test('comes with gateway, switch, loopback, association and host', () => {
    const before = twoSegments(3, { kind: 'hub', hub: 's0' });
    const after = stretched(before, {
      segment: 'a',
      site: { ...newSite, gateway: 'ha-pair' },
      sampleHost: true,
    });
    expect(after.sites['fq']).toEqual({ name: 'Fennel Quay' });
    expect(after.devices['fw-fq']!.kind).toBe('ha-pair');
    expect(after.endpoints['lo-fq']).toMatchObject({ device: 'fw-fq', ipv4: '10.255.0.4/32' });
    expect(Object.keys(after.associations)).toContain('as-ho-fq');
    expect(after.devices['ticketing-fq']).toMatchObject({ kind: 'host', segment: 'a' });
    expect(told(after)).toEqual([]);
    expect(applyPatch(after, inversePatch(before, patchOf(before, after)))).toEqual(before);
  });

  test('behind NAT needs smaller packets, which are lowered when that is asked for', () => {
    const before = twoSegments(3, { kind: 'hub', hub: 's0' });
    const site: SitePlan = { ...newSite, landings: [{ transport: 'coastal-access', nat: 'hides' }] };
    expect(problemsOf(before, { segment: 'a', site })).toEqual([
      {
        field: 'lowerMtu',
        value: false,
        expected: expect.stringMatching(
          /^true, which lowers Ticketing and its hosts from 1396 to 13\d\d bytes; or an MTU of 1\d+ on/,
        ),
      },
    ]);
    const after = stretched(before, { segment: 'a', site, lowerMtu: true, sampleHost: true });
    expect(after.segments['a']!.mtu).toBeLessThan(1396);
    expect(after.devices['ticketing-ho']!.ports['p1']!.mtu).toBe(after.segments['a']!.mtu);
    expect(after.associations['as-ho-fq']!.b.start).toBe('starts');
    expect(told(after)).toEqual([]);
  });
});

const patchOf = (before: Design, after: Design) => {
  const answer = stretchTo(
    { segment: 'a', site: { ...newSite, gateway: 'ha-pair' }, sampleHost: true },
    { design: before, newId: stemIds },
  );
  if (!answer.ok || applyPatch(before, answer.patch).devices['fw-fq'] === undefined)
    throw new Error('refused');
  expect(applyPatch(before, answer.patch)).toEqual(after);
  return answer.patch;
};

describe('a segment without a tunnel yet', () => {
  test('is stretched from the one site where it is', () => {
    const before = twoSegments(3, { kind: 'hub', hub: 's0' });
    const local = applyPatch(before, {
      segments: {
        c: { letter: 'C', name: 'Berth control', protocols: ['ipv4'], sites: { gul: { vlan: 140 } } },
      },
    });
    expect(segmentShape(local, 'c')).toMatchObject({ kind: 'alone', partners: ['gul'] });
    const after = stretched(local, { segment: 'c', site: 'ho', sampleHost: true });
    expect(newTunnels(local, after)).toEqual(['tn-gul-ho-c']);
    expect(after.tunnels['tn-gul-ho-c']!.association).toBe('as-ho-gul');
    expect(after.devices['sw-gul']!.ports['p1']!.allowedVlans).toEqual([110, 120, 140]);
    expect(told(after).filter((text) => !text.startsWith('segment-needs-unknown'))).toEqual([]);
  });

  test('goes bare over a network of one’s own, as its neighbours do', () => {
    const ring = designOf(
      formOf(3, {
        transports: [{ key: 'coast', name: 'Coastal access', kind: 'own-routed', mtu: 1600 }],
        encrypted: false,
      }),
    );
    const after = stretched(ring, { segment: 'a', site: newSite, sampleHost: true });
    expect(after.associations).toEqual({});
    expect(after.tunnels['tn-ho-fq-a']).not.toHaveProperty('association');
    expect(told(after)).toEqual([]);
  });
});

describe('what cannot be done is refused with the way out', () => {
  const design = twoSegments(4, { kind: 'hub', hub: 's0' });
  test.each([
    ['an unknown segment', { segment: 'z', site: 'ske' }, 'segment', 'z', /a segment of this design/],
    ['a site that has it', { segment: 'b', site: 'gul' }, 'site', 'Gullhaven', /CCTV does not reach yet/],
    ['an unknown site', { segment: 'b', site: 'nowhere' }, 'site', 'nowhere', /a site of this design/],
    [
      'a new site of an old name',
      { segment: 'b', site: { ...newSite, name: 'Skerry' } },
      'site.name',
      'Skerry',
      /no site of the design has/,
    ],
    [
      'a transport that is not there',
      { segment: 'b', site: { ...newSite, landings: [{ transport: 'moon' }] } },
      'site.landings.0.transport',
      'moon',
      /a transport of this design/,
    ],
    [
      'a new site without a name',
      { segment: 'b', site: { ...newSite, name: '' } },
      'site.name',
      '',
      /a name, at least one character/,
    ],
  ] as const)('%s', (_what, request, field, value, expected) => {
    expect(problemsOf(design, request as StretchToRequest)).toContainEqual({
      field,
      value,
      expected: expect.stringMatching(expected),
    });
  });

  test('a site without a gateway', () => {
    const bare = applyPatch(design, { sites: { bare: { name: 'Marl' } } });
    expect(problemsOf(bare, { segment: 'b', site: 'bare' })[0]!.expected).toMatch(/place one there first/);
  });

  test('a site that lands on no common transport', () => {
    const apart = applyPatch(design, {
      transports: { moor: { name: 'Moor net', kind: 'private-routed', mtu: 1500 } },
    });
    const site = { ...newSite, landings: [{ transport: 'moor' }] };
    expect(problemsOf(apart, { segment: 'b', site })[0]).toMatchObject({
      field: 'site',
      value: 'Fennel Quay',
      expected: expect.stringMatching(/a transport of Head office/),
    });
  });

  test('two ends of which neither can be reached: the blocking finding that would follow', () => {
    const hidden = applyPatch(design, {
      links: { 'ld-ho-coastal-access': { nat: { forwarded: false }, ipv4: null } },
      segments: { b: { mtu: null } },
    });
    const site = { ...newSite, landings: [{ transport: 'coastal-access', nat: 'hides' as const }] };
    expect(problemsOf(hidden, { segment: 'b', site, lowerMtu: true })[0]!.expected).toMatch(/behind NAT/);
  });
});

test('whatever the assistant made can be stretched further, without a blocking finding or a storm', () => {
  fc.assert(
    fc.property(validForms, fc.nat(9), fc.nat(9), fc.boolean(), (form, s, p, isPair) => {
      const before = designOf({ ...form, sampleHosts: true });
      const ids = Object.keys(before.segments);
      const segment = ids[s % ids.length]!;
      const shape = segmentShape(before, segment);
      const places = Object.keys(before.segments[segment]!.sites);
      const answer = stretchTo(
        {
          segment,
          site: {
            key: 'new',
            name: 'Fennel Quay',
            gateway: isPair ? 'ha-pair' : 'router',
            landings: Object.keys(before.transports).map((transport) => ({ transport })),
          },
          ...(shape.partners.length > 0 ? {} : { from: places[p % places.length]! }),
          sampleHost: true,
          lowerMtu: true,
        },
        { design: before, newId: stemIds, numbering: pools },
      );
      const plan = form.segments[ids.indexOf(segment)]!;
      const isOneToOne = ['lacp', 'eapol', 'spanning-tree'].some((each) =>
        (plan.protocols as readonly string[]).includes(each),
      );
      // What bridges keep to themselves reaches two sites and no more.
      if (isOneToOne) {
        expect(answer.ok).toBe(false);
        return;
      }
      if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
      const after = applyPatch(before, answer.patch);
      expect(parseDesign(after)).toEqual({ ok: true, value: after });
      expect(runRules(after).filter(({ severity }) => severity === 'blocking')).toEqual([]);
      const network = indexNetwork(after);
      expect(findStorms(floodGraph(network))).toEqual([]);
      const { groups, partings } = segmentReach(network, segment);
      expect(partings).toEqual([]);
      expect(groups).toHaveLength(1);
      expect(applyPatch(after, inversePatch(before, answer.patch))).toEqual(before);
    }),
    { numRuns: 30 },
  );
});
