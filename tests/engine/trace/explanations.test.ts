import { readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { rules } from '#engine/rules/index.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { explainDrop, explainStorm } from '#engine/trace/explanations.ts';
import type { DropReason } from '#engine/trace/trace.ts';
import { meshDesign, pairDesign } from '../../support/designs.ts';
import { arpFrom, changed, follow, packetTo, verdictsOf } from './follow.ts';

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

describe('the rules pointed at', () => {
  it('exist', () => {
    const ids = new Set(rules.map(({ id }) => id));
    const association = (): string => 'as';
    const reasons = [
      {
        code: 'association-down',
        tunnel: 't',
        association: 'a',
        reasons: associationCodes.map((code) => ({ code })),
      },
      { code: 'tunnel-down', tunnel: 't', reasons: tunnelCodes.map((code) => ({ code })) },
      ...otherCodes.map((code) => ({ code })),
    ] as unknown as readonly DropReason[];
    const named = [
      ...reasons.flatMap((reason) => explainDrop(reason, association, undefined)),
      ...explainStorm([], undefined),
    ].map(({ rule }) => rule);
    expect(new Set(named).size).toBeGreaterThan(20);
    expect(named.filter((rule) => !ids.has(rule))).toEqual([]);
    const files = readdirSync(new URL('../../../src/engine/rules', import.meta.url));
    expect(files).toEqual(expect.arrayContaining([...new Set(named)].map((rule) => `${rule}.ts`)));
  });
});

const associationCodes = [
  'no-path',
  'ike-versions-differ',
  'authentication-differs',
  'proposals-differ',
  'nobody-starts',
  'both-dynamic',
  'both-behind-nat',
  'neither-reachable',
  'wrong-initiator',
  'transport-filters',
];
const tunnelCodes = [
  'no-path',
  'transport-filters',
  'ends-off-association',
  'families-differ',
  'selectors-miss',
  'endpoint-on-standby',
];
const otherCodes = [
  'no-such-vni',
  'no-such-udp-port',
  'transport-filters',
  'oversize',
  'filter',
  'tag-discarded',
  'tunnel-unclaimed',
  'isolation',
  'vlan-not-allowed',
  'tag-not-carried',
];
