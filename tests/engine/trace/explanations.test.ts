import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { rules } from '#engine/rules/index.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { ProbeInput } from '#engine/trace/probe.ts';
import { toldBy } from '#engine/trace/told-by.ts';
import { faults } from '../../support/faults.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { arpFrom, changed, follow, groupFrom, packetTo, reservedFrom, verdictsOf } from './follow.ts';

const explained = (design: Design, probe = packetTo('h-s1-a', 1396)) => {
  const findings = runRules(design);
  return {
    findings,
    explains: verdictsOf(follow(design, probe, { findings })).flatMap((verdict) =>
      verdict.code === 'dropped' || verdict.code === 'circulating' ? (verdict.explains ?? []) : [],
    ),
  };
};

describe('a drop points at the finding that would have told', () => {
  const end = (more: MergePatch): MergePatch => ({ associations: { 'as-s0-s1': { b: more } } });
  const cases: readonly (readonly [string, MergePatch])[] = [
    ['tunnel-vni-mismatch', { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_210 } } } }],
    ['tunnel-udp-port-mismatch', { tunnels: { 'tn-s0-s1-a': { b: { udpPort: 8472 } } } }],
    ['ike-version-mismatch', end({ ikeVersion: 1 })],
    ['authentication-mismatch', end({ authentication: { method: 'certificate', vaultEntry: null } })],
    ['association-proposals-differ', end({ espProposals: { first: { encryption: 'aes-gcm-8' } } })],
    ['association-nobody-starts', { associations: { 'as-s0-s1': { a: { start: 'answers' } } } }],
    ['transport-filters-needed', { transports: { coast: { filters: ['esp'] } } }],
    ['association-selectors-miss-loopbacks', end({ selectors: { loopbacks: { local: '10.255.0.99/32' } } })],
    ['frame-exceeds-path', { transports: { coast: { mtu: 1492 } } }],
    ['cross-connect-without-policy', { forwarders: { 'br-s0-a': { kind: 'cross-connect' } } }],
    ['vlan-missing-on-path', { devices: { 'sw-s0': { ports: { p1: { allowedVlans: [999] } } } } }],
  ];
  it.each(cases)('%s', (rule, patch) => {
    const { findings, explains } = explained(changed(pairDesign(), patch));
    const finding = findings.find((one) => one.rule === rule);
    expect(finding).toBeDefined();
    expect(explains).toContainEqual({ rule, key: finding!.key, elements: finding!.elements });
  });

  it('points at the storm’s finding where a copy comes round', () => {
    const { findings, explains } = explained(meshDesign(3), arpFrom('h-s0-a'));
    const { key } = findings.find(({ rule }) => rule === 'storm-any-to-any-mesh')!;
    expect(explains.map((one) => one.key)).toEqual([key, key]);
    expect(follow(meshDesign(3), arpFrom('h-s0-a'), { findings }).storm?.explains).toMatchObject([{ key }]);
  });

  it('points at nothing where the findings at hand don’t include it, and at the rule where none are at hand', () => {
    const design = changed(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_210 } } } });
    const [without] = verdictsOf(follow(design, packetTo('h-s1-a', 84)));
    expect(without).toMatchObject({ explains: [{ rule: 'tunnel-vni-mismatch' }] });
    const [none] = verdictsOf(follow(design, packetTo('h-s1-a', 84), { findings: [] }));
    expect(none).not.toHaveProperty('explains');
  });
});

type Code = keyof typeof toldBy;
const codes = Object.keys(toldBy) as Code[];
const isSilent = (code: Code): boolean => typeof toldBy[code] !== 'function';
const ruleIds = new Set(rules.map(({ id }) => id));
const ping = packetTo('h-s1-a', 84);
const tunnel = 'tn-s0-s1-a';
const whole: MergePatch = { circuits: { access: { vlans: 'all' } } };
const carrying = (...protocols: readonly string[]): MergePatch => ({
  segments: { a: { protocols: ['ipv4', ...protocols] } },
});
const lowering: MergePatch = {
  profiles: { make: { name: 'Make', multicastTtl: 'lowered' } },
  devices: { 'fw-s0': { profile: 'make' } },
};

/** For every way of being dropped that a check speaks of: a design, and a frame that ends so. */
const dropsTold: Readonly<Partial<Record<Code, readonly [design: Design, probe: ProbeInput, rule: string]>>> =
  {
    'no-such-vni': [
      changed(pairDesign(), { tunnels: { [tunnel]: { b: { vni: 10_210 } } } }),
      ping,
      'tunnel-vni-mismatch',
    ],
    'no-such-udp-port': [
      changed(pairDesign(), { tunnels: { [tunnel]: { b: { udpPort: 8472 } } } }),
      ping,
      'tunnel-udp-port-mismatch',
    ],
    'association-down': [
      changed(pairDesign(), { associations: { 'as-s0-s1': { a: { start: 'answers' } } } }),
      ping,
      'association-nobody-starts',
    ],
    'tunnel-down': [
      changed(pairDesign(), {
        associations: { 'as-s0-s1': { b: { selectors: { loopbacks: { local: '10.255.0.99/32' } } } } },
      }),
      ping,
      'association-selectors-miss-loopbacks',
    ],
    'transport-filters': [
      changed(pairDesign({ join: { protectedBy: false } }), {
        transports: { coast: { filters: ['udp-4789'] } },
      }),
      ping,
      'transport-filters-needed',
    ],
    oversize: [
      changed(pairDesign(), { transports: { coast: { mtu: 1492 } } }),
      packetTo('h-s1-a', 1396),
      'frame-exceeds-path',
    ],
    'oversize-frame': [
      changed(pairDesign(), { devices: { 'sw-s0': { ports: { p1: { mtu: 1300 } } } } }),
      packetTo('h-s1-a', 1396),
      'port-mtu-below-segment',
    ],
    filter: [
      changed(pairDesign(), { forwarders: { 'br-s0-a': { kind: 'cross-connect' } } }),
      ping,
      'cross-connect-without-policy',
    ],
    'multicast-dropped': [
      changed(pairDesign(), carrying('ospf'), { forwarders: { 'br-s0-a': { multicast: 'drop' } } }),
      groupFrom('h-s0-a', '224.0.0.5'),
      'multicast-dropped-on-path',
    ],
    'reserved-group': [
      changed(pairDesign(), carrying('lacp')),
      reservedFrom('h-s0-a', '02'),
      'reserved-group-not-passed',
    ],
    'hop-limit-zero': [
      changed(pairDesign(), carrying('ospf'), lowering),
      groupFrom('h-s0-a', '224.0.0.5', { hopLimit: 1 }),
      'hop-limit-lowered',
    ],
    'hop-limit-required': [
      changed(pairDesign(), carrying('vrrp'), lowering),
      groupFrom('h-s0-a', '224.0.0.18', { hopLimit: 255, requiredHopLimit: 255 }),
      'hop-limit-lowered',
    ],
    'tag-discarded': [
      changed(pairDesign(), {
        forwarders: { 'br-s0-a': whole },
        tunnels: { [tunnel]: { a: { innerTags: 'keep' } } },
      }),
      ping,
      'tunnel-tag-mode-mismatch',
    ],
    'tunnel-unclaimed': [
      changed(pairDesign(), { forwarders: { 'br-s1-a': { circuits: { [tunnel]: null } } } }),
      ping,
      'segment-hosts-parted',
    ],
    isolation: [hubDesign(2, { join: { isolation: 'apart' } }), arpFrom('h-s1-a'), 'isolation-missing-leg'],
    'split-horizon': [
      changed(hubDesign(2), {
        profiles: { mp: { name: 'Multipoint', vniScope: 'multipoint' } },
        devices: { 'fw-s0': { profile: 'mp' } },
        tunnels: { 'tn-s0-s2-a': { a: { vni: 10_000 }, b: { vni: 10_000 } } },
      }),
      arpFrom('h-s1-a'),
      'segment-hosts-parted',
    ],
    'vlan-not-allowed': [
      changed(pairDesign(), { devices: { 'sw-s0': { ports: { p1: { allowedVlans: [120] } } } } }),
      ping,
      'vlan-missing-on-path',
    ],
    'no-circuit': [
      changed(pairDesign(), { forwarders: { 'br-s0-a': { circuits: { access: { vlans: [130] } } } } }),
      ping,
      'vlan-missing-on-path',
    ],
    'tag-at-access-port': [
      changed(pairDesign(), {
        devices: { 'h-s0-a': { ports: { p1: { mode: 'trunk', vlan: null, allowedVlans: [110] } } } },
      }),
      ping,
      'vlan-missing-on-path',
    ],
    'no-native-vlan': [
      changed(pairDesign(), {
        devices: { 'sw-s0': { ports: { p2: { mode: 'trunk', vlan: null, allowedVlans: [110] } } } },
      }),
      ping,
      'vlan-missing-on-path',
    ],
    'host-tag': [
      changed(pairDesign(), {
        devices: {
          'h-s1-a': { ports: { p1: { mode: 'access' } } },
          'sw-s1': { ports: { p2: { mode: 'trunk', vlan: null, allowedVlans: [110] } } },
        },
      }),
      { ...ping, destination: { kind: 'host', host: 'h-s1-a', learned: false } },
      'segment-hosts-parted',
    ],
    'tag-not-carried': [
      changed(pairDesign(), {
        segments: { a: { sites: { s1: { vlan: 120 } } } },
        devices: {
          'fw-s1': { ports: { lan1: { allowedVlans: [120] } } },
          'sw-s1': { ports: { p1: { allowedVlans: [120] }, p2: { vlan: 120 } } },
        },
        forwarders: {
          'br-s0-a': whole,
          'br-s1-a': { circuits: { access: { vlans: [120], tag: 'kept' } } },
        },
        tunnels: { [tunnel]: { a: { innerTags: 'keep' }, b: { innerTags: 'keep' } } },
      }),
      arpFrom('h-s0-a'),
      'segment-hosts-parted',
    ],
    'port-shut': [
      changed(pairDesign(), { devices: { 'h-s0-a': { ports: { p1: { shut: true } } } } }),
      ping,
      'segment-hosts-parted',
    ],
    standby: [
      changed(pairDesign({ hub: 'ha-pair' }), { links: { 'cb-s0-up1': null } }),
      arpFrom('h-s0-a'),
      'switch-single-homed',
    ],
    'not-cabled': [changed(pairDesign(), { links: { 'cb-h-s0-a': null } }), ping, 'segment-hosts-parted'],
  };

const dropsOf = (design: Design, probe: ProbeInput, findings?: ReturnType<typeof runRules>) =>
  verdictsOf(follow(design, probe, findings === undefined ? {} : { findings })).filter(
    (verdict) => verdict.code === 'dropped',
  );

describe('every way in which a frame is dropped', () => {
  const told = codes.filter((code) => !isSilent(code));

  it('is one that checks speak of, or says why none does', () => {
    expect(Object.keys(dropsTold).sort()).toEqual([...told].sort());
    for (const code of codes) {
      const tells = toldBy[code];
      if (typeof tells !== 'function') expect(tells.noRule).toMatch(/^[A-Z].{20,}\.$/);
    }
  });

  it.each(told)('%s points at a finding that was really made', (code) => {
    const [design, probe, rule] = dropsTold[code]!;
    const findings = runRules(design);
    const found = findings.find((one) => one.rule === rule);
    expect(found, `${rule} among ${findings.map((one) => one.rule).join(', ')}`).toBeDefined();
    const drops = dropsOf(design, probe, findings).filter(({ reason }) => reason.code === code);
    expect(drops.flatMap(({ explains = [] }) => explains)).toContainEqual({
      rule,
      key: found!.key,
      elements: found!.elements,
    });
  });

  it('names checks that exist, in designs of any kind, and only findings that were made', () => {
    const probes = [
      ping,
      packetTo('h-s1-a', 1500, { dontFragment: true, learned: false }),
      arpFrom('h-s1-a'),
      groupFrom('h-s0-a', '224.0.0.5', { hopLimit: 1 }),
      reservedFrom('h-s0-a', '00'),
    ];
    const check = (design: Design): void => {
      const findings = runRules(design);
      const keys = new Set(findings.map(({ key }) => key));
      for (const probe of probes) {
        for (const { reason, explains = [] } of dropsOf(design, probe, findings)) {
          for (const { key } of explains) expect(keys).toContain(key);
          if (isSilent(reason.code)) expect(explains).toEqual([]);
        }
        for (const { byDesign, explains = [] } of dropsOf(design, probe)) {
          for (const { rule } of explains) expect(ruleIds).toContain(rule);
          if (byDesign) expect(explains).toEqual([]);
        }
      }
    };
    for (const fault of faults) check(changed(pairDesign({ segments: ['a', 'b'] }), fault));
    fc.assert(fc.property(generatedDesign, check), { numRuns: 60 });
  }, 60_000);

  it('is told of where it parts two hosts of a segment that nothing else brings together', () => {
    fc.assert(
      fc.property(generatedDesign, (design) => {
        const findings = runRules(design);
        const trace = follow(design, arpFrom('h-s0-a'), { findings });
        const isParted =
          trace.storm === undefined && !trace.deliveries.some(({ device }) => device === 'h-s1-a');
        if (!isParted) return;
        expect(findings.filter(({ severity }) => severity === 'blocking')).not.toEqual([]);
      }),
      { numRuns: 100 },
    );
  }, 60_000);
});
