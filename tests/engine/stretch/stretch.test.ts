import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { segmentReach } from '#engine/flood/segment-reach.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import { applyPatch, inversePatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { numberClashes } from '#engine/numbering/number-clashes.ts';
import { numbersOf } from '#engine/numbering/numbers-of.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { stretch } from '#engine/stretch/stretch.ts';
import { formOf, stemIds, validForms } from '../../support/stretch-forms.ts';

const empty = emptyDesign('Stretch');
const built = (form: unknown, design: Design = empty): Design => {
  const answer = stretch(form, { design, newId: stemIds });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return applyPatch(design, answer.patch);
};
const problemsOf = (form: unknown) => {
  const answer = stretch(form, { design: empty, newId: stemIds });
  return answer.ok ? [] : answer.problems;
};
/** Findings of a design whose documentation addresses are meant, as `rule: sentence`. */
const told = (design: Design): readonly string[] =>
  runRules({ ...design, meta: { ...design.meta, example: true } }).map(
    ({ rule, severity, sentence }) => `${rule} (${severity}): ${sentence}`,
  );

test('tunnels get names and numbers that no other design of the workspace has', () => {
  const form = formOf(3);
  const other = numbersOf(built(form));
  const answer = stretch(form, { design: empty, newId: stemIds, numbering: { otherDesigns: [other] } });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  expect(numberClashes(applyPatch(empty, answer.patch), { otherDesigns: [other] })).toEqual([]);
});

describe('any valid form', () => {
  // What nobody told the form stays unknown, and LLDP stays at home: all is said, and none of it blocks.
  const honest = [
    'transport-mtu-unknown (advisory)',
    'segment-needs-unknown (advisory)',
    'reserved-group-not-passed (advisory)',
  ];

  test('gives a valid design in which no check finds more than what nobody could know', () => {
    fc.assert(
      fc.property(validForms, (form) => {
        const design = built(form);
        expect(parseDesign(design)).toEqual({ ok: true, value: design });
        expect(told(design).filter((text) => !honest.some((rule) => text.startsWith(rule)))).toEqual([]);
      }),
      { numRuns: 60 },
    );
  });

  test('lets every host of a segment reach every other, without a storm', () => {
    fc.assert(
      fc.property(validForms, (form) => {
        const network = indexNetwork(built({ ...form, sampleHosts: true }));
        expect(findStorms(floodGraph(network))).toEqual([]);
        for (const segment of Object.keys(network.design.segments)) {
          const { groups, partings, unattachedSites } = segmentReach(network, segment);
          expect(partings).toEqual([]);
          expect(unattachedSites).toEqual([]);
          expect(groups).toHaveLength(1);
          const hosts = groups[0]!.points.filter(
            ({ device }) => network.design.devices[device]!.kind === 'host',
          );
          expect(hosts).toHaveLength(Object.keys(network.design.segments[segment]!.sites).length);
        }
      }),
      { numRuns: 30 },
    );
  });

  test('is one patch that can be undone, the same each time', () => {
    fc.assert(
      fc.property(validForms, (form) => {
        const answer = stretch(form, { design: empty, newId: stemIds });
        if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
        expect(stretch(form, { design: empty, newId: stemIds })).toEqual(answer);
        const after = applyPatch(empty, answer.patch);
        expect(applyPatch(after, inversePatch(empty, answer.patch))).toEqual(empty);
      }),
      { numRuns: 20 },
    );
  });

  test('can be answered beside what a design has already, with numbers and names of its own', () => {
    fc.assert(
      fc.property(validForms, validForms, (first, second) => {
        const before = built(first);
        const after = built(
          { ...second, segments: second.segments.map(({ subnet: _subnet, ...segment }) => segment) },
          before,
        );
        expect(parseDesign(after)).toEqual({ ok: true, value: after });
        expect(Object.keys(after.tunnels).length).toBeGreaterThan(Object.keys(before.tunnels).length);
        expect(told(after).filter((text) => !honest.some((rule) => text.startsWith(rule)))).toEqual([]);
      }),
      { numRuns: 20 },
    );
  });
});

test('lands new sites on a transport that the design has already', () => {
  const before = built(formOf(2));
  const [transport] = Object.keys(before.transports);
  const more = formOf(2, {
    sites: formOf(4).sites.slice(2),
    segments: [{ key: 'b', name: 'CCTV', protocols: ['ipv4'] }],
    // What the form says of it beside its id is not asked.
    transports: [{ key: 'coast', existing: transport!, name: 'Whatever', kind: 'own-routed', mtu: 9000 }],
  });
  const after = built(more, before);
  expect(after.transports).toEqual(before.transports);
  expect(after.segments['b']!.mtu).toBe(1396);
  expect(told(after)).toEqual([]);
  expect(problemsOf({ ...more, transports: [{ ...more.transports[0], existing: 'moon' }] })).toEqual([
    { field: 'transports.0.existing', value: 'moon', expected: 'a transport of this design' },
  ]);
});

describe('topologies', () => {
  const joinsOf = (design: Design): readonly string[] => Object.keys(design.tunnels).sort();

  test('a hub has one tunnel for each spoke, a chain one for each step, a mesh one for each pair', () => {
    expect(joinsOf(built(formOf(4)))).toEqual(['tn-ho-gul-a', 'tn-ho-op-a', 'tn-ho-ske-a']);
    expect(joinsOf(built(formOf(4, { topology: { kind: 'chain' } })))).toEqual([
      'tn-gul-op-a',
      'tn-ho-gul-a',
      'tn-op-ske-a',
    ]);
    expect(joinsOf(built(formOf(4, { topology: { kind: 'mesh' } })))).toHaveLength(6);
  });

  test('tunnels of a mesh are in one isolation group at every site, those of other shapes in none', () => {
    const groups = (design: Design): readonly (string | undefined)[] => [
      ...new Set(
        Object.values(design.forwarders).flatMap(({ circuits }) =>
          Object.values(circuits)
            .filter(({ kind }) => kind === 'tunnel')
            .map(({ isolation }) => isolation),
        ),
      ),
    ];
    expect(groups(built(formOf(4, { topology: { kind: 'mesh' } })))).toEqual(['mesh']);
    expect(groups(built(formOf(4)))).toEqual([undefined]);
    expect(groups(built(formOf(2, { topology: { kind: 'mesh' } })))).toEqual([undefined]);
  });

  test('every tunnel has a VNI of its own, from the pool', () => {
    const { tunnels } = built(
      formOf(5, { topology: { kind: 'mesh' }, pools: { vnis: { from: 7000, to: 7099 } } }),
    );
    const vnis = Object.values(tunnels).map(({ a }) => a.vni!);
    expect(vnis).toHaveLength(10);
    expect([...vnis].sort()).toEqual(Array.from({ length: 10 }, (_, i) => 7000 + i));
  });

  test('a hub passes on a segment that it does not have', () => {
    const design = built(
      formOf(3, {
        segments: [
          { key: 'a', name: 'Ticketing', protocols: ['ipv4'] },
          { key: 'b', name: 'Berth control', protocols: ['ipv4', 'multicast'], sites: ['s1', 's2'] },
        ],
      }),
    );
    const carried = tunnelSegments(indexNetwork(design));
    expect(carried.get('tn-ho-gul-b')).toEqual(['b']);
    expect(carried.get('tn-ho-op-b')).toEqual(['b']);
    expect(design.segments['b']!.sites).not.toHaveProperty('ho');
    expect(told(design)).toEqual([]);
  });
});

describe('pairs and filters', () => {
  test('both members of a pair reach the switch, the transport and share the loopback', () => {
    const design = built(
      formOf(2, {
        sites: formOf(2).sites.map((site, i) => (i === 0 ? { ...site, gateway: 'ha-pair' } : site)),
      }),
    );
    expect(design.devices['fw-ho']).toMatchObject({ kind: 'ha-pair', stateSync: true });
    const members = Object.values(design.links).flatMap((link) =>
      link.kind === 'cable' && link.a.device === 'sw-ho' && link.b.device === 'fw-ho' ? [link.b.member] : [],
    );
    expect(members).toEqual([1, 2]);
    expect(design.links['ld-ho-coastal-access']).not.toHaveProperty('members');
    expect(design.endpoints['lo-ho']).not.toHaveProperty('member');
    expect(told(design)).toEqual([]);
  });

  test('a filtered segment passes cross-connects whose policies name its protocols and log the rest', () => {
    const design = built(
      formOf(2, {
        segments: [
          {
            key: 'a',
            name: 'Berth control',
            subnet: '10.120.0.0/24',
            protocols: ['ipv4', 'vrrp', 'real-time-ethernet'],
            etherTypes: [0x88b5],
            mustBeFiltered: true,
          },
        ],
      }),
    );
    const [first] = Object.values(design.forwarders);
    expect(Object.values(design.forwarders).map(({ kind }) => kind)).toEqual([
      'cross-connect',
      'cross-connect',
    ]);
    expect(Object.values(first!.policy!).map(({ action, frames }) => `${action} ${frames}`)).toEqual(
      expect.arrayContaining([
        'permit arp',
        'permit ipv4',
        'permit multicast',
        'permit ethertype',
        'deny any',
      ]),
    );
    expect(told(design)).toEqual([]);
  });

  test('at a hub the spokes filter; along a chain each tunnel has a cross-connect and an uplink of its own', () => {
    const segments = [
      {
        key: 'a',
        name: 'Berth control',
        subnet: '10.120.0.0/24',
        protocols: ['ipv4' as const],
        mustBeFiltered: true,
      },
    ];
    const kinds = (design: Design, device: string): readonly string[] =>
      Object.values(design.forwarders)
        .filter((forwarder) => forwarder.device === device)
        .map(({ kind }) => kind);
    const hub = built(formOf(3, { segments }));
    expect(kinds(hub, 'fw-ho')).toEqual(['bridge']);
    expect(kinds(hub, 'fw-gul')).toEqual(['cross-connect']);
    const chain = built(formOf(3, { segments, topology: { kind: 'chain' } }));
    expect(kinds(chain, 'fw-gul')).toEqual(['cross-connect', 'cross-connect']);
    expect(Object.keys(chain.devices['fw-gul']!.ports)).toEqual(['wan1', 'lan1', 'lan2']);
    expect([...told(hub), ...told(chain)]).toEqual([]);
  });
});

describe('packet sizes', () => {
  test('a segment is committed to what fits through its narrowest tunnel, and its hosts with it', () => {
    const design = built(formOf(3));
    expect(design.segments['a']!.mtu).toBe(1396);
    expect(design.devices['ticketing-gul']!.ports['p1']!.mtu).toBe(1396);
    const behindNat = built(
      formOf(3, {
        sites: formOf(3).sites.map((site, i) =>
          i === 2 ? { ...site, landings: [{ transport: 'coast', nat: 'hides' as const }] } : site,
        ),
      }),
    );
    expect(behindNat.segments['a']!.mtu).toBeLessThan(1396);
  });

  test('where the transport takes more, nothing is taken from 1,500 bytes', () => {
    const transports = [{ key: 'coast', name: 'Terminal ring', kind: 'own-routed' as const, mtu: 1600 }];
    expect(built(formOf(2, { transports, encrypted: false })).segments['a']!.mtu).toBe(1500);
  });

  test('an unknown transport MTU leaves the segment’s open, and says so', () => {
    const transports = [{ key: 'coast', name: 'Coastal access', kind: 'internet' as const }];
    const design = built(formOf(2, { transports }));
    expect(design.segments['a']).not.toHaveProperty('mtu');
    expect(told(design)).toEqual([
      expect.stringMatching(/^segment-needs-unknown/),
      expect.stringMatching(/^transport-mtu-unknown/),
    ]);
  });
});

test('writes standing notes where they are asked for, and beside none that are there', () => {
  expect(built(formOf(2)).notes).toEqual({});
  const noted = built(formOf(2, { standingNotes: true }));
  expect(Object.values(noted.notes).map(({ text }) => text)).toEqual([
    'UDP 4789 and outer DF set at both ends. Inner IP packets up to 1396 B.',
    expect.stringMatching(/None is written here/),
    expect.stringMatching(/joins failure domains/),
  ]);
  const own = applyPatch(empty, { notes: { mine: { text: 'Mine' } } });
  expect(Object.keys(built(formOf(2, { standingNotes: true }), own).notes)).toEqual(['mine']);
});

describe('a form that cannot be built is refused with field, value and way out', () => {
  const segment = formOf(3).segments[0]!;
  const site = (i: number) => formOf(4).sites[i]!;
  test.each([
    [
      'two sites in a hub of one name',
      formOf(3, { sites: [site(0), site(1), { ...site(2), name: 'gullhaven' }] }),
      'sites.2.name',
      'gullhaven',
      /a name of its own/,
    ],
    [
      'three sites as a pair',
      formOf(3, { topology: { kind: 'pair' } }),
      'topology.kind',
      'pair',
      /hub, chain or mesh/,
    ],
    [
      'an unknown hub',
      formOf(3, { topology: { kind: 'hub', hub: 's9' } }),
      'topology.hub',
      's9',
      /a site of this form/,
    ],
    [
      'a filtered mesh',
      formOf(3, { topology: { kind: 'mesh' }, segments: [{ ...segment, mustBeFiltered: true }] }),
      'segments.0.mustBeFiltered',
      true,
      /a hub or a chain/,
    ],
    [
      'LACP across three sites',
      formOf(3, { segments: [{ ...segment, protocols: ['ipv4', 'lacp'] }] }),
      'segments.0.protocols',
      ['lacp'],
      /leave them out or give the segment two sites/,
    ],
    [
      'real-time Ethernet through a filter without its EtherTypes',
      formOf(2, {
        segments: [{ ...segment, protocols: ['real-time-ethernet'], mustBeFiltered: true }],
      }),
      'segments.0.etherTypes',
      undefined,
      /such as 0x88b5/,
    ],
    [
      'two segments in one VLAN of a site',
      formOf(2, {
        segments: [
          { ...segment, vlan: 110 },
          { key: 'b', name: 'CCTV', vlan: 110, protocols: ['ipv4'] },
        ],
      }),
      'segments.1.vlan',
      110,
      /another VLAN than Ticketing/,
    ],
    [
      'subnets that overlap',
      formOf(2, {
        segments: [segment, { key: 'b', name: 'CCTV', subnet: '10.110.2.0/24', protocols: ['ipv4'] }],
      }),
      'segments.1.subnet',
      '10.110.2.0/24',
      /clear of 10\.110\.0\.0\/22/,
    ],
    [
      'no encryption over the internet',
      formOf(2, { encrypted: false }),
      'encrypted',
      false,
      /Coastal access is not trusted/,
    ],
    [
      'two ends that NAT hides',
      formOf(2, {
        sites: [0, 1].map((i) => ({ ...site(i), landings: [{ transport: 'coast', nat: 'hides' as const }] })),
      }),
      'sites.1.landings',
      'hides',
      /forward UDP 500 and 4500/,
    ],
    [
      'a private address on the internet without NAT',
      formOf(2, {
        sites: [{ ...site(0), landings: [{ transport: 'coast', address: '10.0.0.1' }] }, site(1)],
      }),
      'sites.0.landings.0.address',
      '10.0.0.1',
      /NAT in front of it/,
    ],
    [
      'sites without a common transport',
      formOf(2, {
        transports: [
          ...formOf(2).transports,
          { key: 'ring', name: 'Terminal ring', kind: 'own-routed', mtu: 1600 },
        ],
        sites: [site(0), { ...site(1), landings: [{ transport: 'ring' }] }],
      }),
      'sites.1.landings',
      ['ring'],
      /a transport that Head office lands on/,
    ],
    [
      'a segment that is larger than what fits',
      formOf(2, { segments: [{ ...segment, mtu: 1500 }] }),
      'segments.0.mtu',
      1500,
      /at most 1396, .* MTU of 1604/,
    ],
    [
      'IPv6 over too small a transport',
      formOf(2, {
        transports: [{ key: 'coast', name: 'Coastal access', kind: 'internet', mtu: 1300 }],
        segments: [{ key: 'a', name: 'Ticketing', protocols: ['ipv6'] }],
      }),
      'transports.0.mtu',
      1300,
      /1384 or more/,
    ],
    [
      'a pool with too few loopbacks',
      formOf(4, { pools: { loopbacks: '10.255.0.4/31' } }),
      'pools.loopbacks',
      '10.255.0.4/31',
      /4 free loopbacks in the pool, which has 2/,
    ],
    [
      'a site that no segment has',
      formOf(4, { topology: { kind: 'mesh' }, segments: [{ ...segment, sites: ['s0', 's1', 's2'] }] }),
      'sites.3.name',
      'Skerry',
      /give it one, or leave it out/,
    ],
  ])('%s', (_what, form, field, value, expected) => {
    expect(problemsOf(form)).toContainEqual({ field, value, expected: expect.stringMatching(expected) });
  });

  test('fields of the wrong kind are all named at once', () => {
    expect(
      problemsOf({ ...formOf(2), encrypted: 'yes', segments: [{ ...segment, vlan: 5000 }], colour: 'red' }),
    ).toEqual(
      expect.arrayContaining([
        { field: 'encrypted', value: 'yes', expected: 'true or false' },
        { field: 'segments.0.vlan', value: 5000, expected: 'a VLAN from 1 to 4094; 4095 is reserved' },
        {
          field: 'colour',
          value: 'red',
          expected: 'no field of this name: leave it out or correct its spelling',
        },
      ]),
    );
    expect(problemsOf(undefined)).toEqual([{ field: 'form', value: undefined, expected: 'an object' }]);
  });
});
