import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { associationPath, tunnelPath } from '#engine/network/association-path.ts';
import { canComeUp } from '#engine/network/can-come-up.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { negotiate } from '#engine/network/negotiate.ts';
import { selectorsCover } from '#engine/network/selectors-cover.ts';
import { pairDesign } from '../../support/designs.ts';

const association = { collection: 'associations', id: 'as-s0-s1' } as const;
const tunnel = { collection: 'tunnels', id: 'tn-s0-s1-a' } as const;
const changed = (patch: MergePatch) => indexNetwork(applyPatch(pairDesign(), patch));
const ofAssociation = (a: MergePatch, b: MergePatch = {}) =>
  canComeUp(changed({ associations: { 'as-s0-s1': { a, b } } }), association).reasons;
const landings = (s0: MergePatch, s1: MergePatch): MergePatch => ({
  links: { 'ld-s0-coast': s0, 'ld-s1-coast': s1 },
});
const ofLandings = (s0: MergePatch, s1: MergePatch, ends: MergePatch = {}) =>
  canComeUp(changed({ ...landings(s0, s1), associations: { 'as-s0-s1': ends } }), association).reasons;
const ofTunnel = (patch: MergePatch) => canComeUp(changed(patch), tunnel).reasons;
const codes = (reasons: readonly { readonly code: string }[]) => reasons.map(({ code }) => code);

describe('the path of an association', () => {
  it('is the first pair of landings that share a transport and a family', () => {
    expect(associationPath(changed({}), 'as-s0-s1')).toEqual({
      ok: true,
      transport: 'coast',
      landingA: 'ld-s0-coast',
      landingB: 'ld-s1-coast',
      family: 4,
    });
  });

  it('may use any landing of the device where an end names none', () => {
    const network = changed({ associations: { 'as-s0-s1': { a: { via: null }, b: { via: null } } } });
    expect(associationPath(network, 'as-s0-s1')).toMatchObject({ ok: true, landingB: 'ld-s1-coast' });
  });

  it('falls to the second landing when the first shares no transport with the far end', () => {
    const network = changed({
      transports: { moor: { name: 'Moor radio', kind: 'own-routed' } },
      devices: { 'fw-s0': { ports: { wan9: { number: 9, role: 'wan' } } } },
      links: { 'ld-s0-moor': { kind: 'landing', device: 'fw-s0', port: 'wan9', transport: 'moor' } },
      associations: { 'as-s0-s1': { a: { via: { moor: { rank: 'Zz', landing: 'ld-s0-moor' } } } } },
    });
    expect(associationPath(network, 'as-s0-s1')).toMatchObject({ ok: true, landingA: 'ld-s0-coast' });
  });

  it.each([
    [
      'no landing at all',
      { links: { 'ld-s1-coast': null }, associations: { 'as-s0-s1': { b: { via: null } } } },
      'no-landing',
    ],
    ['a shut port', { devices: { 'fw-s1': { ports: { wan1: { shut: true } } } } }, 'landing-silent'],
    [
      'the landing of another device',
      { associations: { 'as-s0-s1': { b: { via: { first: { landing: 'ld-s0-coast' } } } } } },
      'via-off-device',
    ],
    [
      'different families',
      {
        transports: { coast: { families: [4, 6] } },
        links: { 'ld-s1-coast': { ipv4: null, ipv6: '2001:db8::1' } },
      },
      'no-common-family',
    ],
    [
      'a family that the transport does not carry',
      { transports: { coast: { families: [6] } } },
      'no-common-family',
    ],
    [
      'different transports',
      {
        transports: { moor: { name: 'Moor', kind: 'own-routed' } },
        links: { 'ld-s1-coast': { transport: 'moor' } },
      },
      'no-common-transport',
    ],
  ] as const)('does not exist with %s', (_title, patch, code) => {
    expect(associationPath(changed(patch as MergePatch), 'as-s0-s1')).toMatchObject({
      ok: false,
      reason: { code },
    });
  });

  it('needs the active member of a pair on the transport', () => {
    const design = applyPatch(pairDesign({ hub: 'ha-pair' }), { links: { 'ld-s0-coast': { members: '2' } } });
    expect(associationPath(indexNetwork(design), 'as-s0-s1')).toMatchObject({
      reason: { code: 'landing-silent' },
    });
    const swapped = applyPatch(design, { devices: { 'fw-s0': { active: 2 } } });
    expect(associationPath(indexNetwork(swapped), 'as-s0-s1').ok).toBe(true);
  });

  it('is given to a tunnel by its own ends, however the association was drawn', () => {
    const { a, b } = pairDesign().tunnels['tn-s0-s1-a']!;
    const network = changed({ tunnels: { 'tn-s0-s1-a': { a: { ...b }, b: { ...a } } } } as MergePatch);
    expect(tunnelPath(network, 'tn-s0-s1-a')).toMatchObject({
      landingA: 'ld-s1-coast',
      landingB: 'ld-s0-coast',
    });
    expect(canComeUp(network, tunnel).up).toBe(true);
  });
});

describe('negotiate', () => {
  const of = (a: MergePatch, b: MergePatch = {}) =>
    negotiate(applyPatch(pairDesign(), { associations: { 'as-s0-s1': { a, b } } }).associations['as-s0-s1']!);

  it('settles on the first common proposal of the end that starts', () => {
    const weaker = {
      second: { rank: 'b0', encryption: 'aes-cbc', keyBits: 128, integrity: 'hmac-sha2-256-128', group: 14 },
    } as const;
    expect(of({ espProposals: weaker }, { espProposals: weaker }).esp).toMatchObject({
      state: 'agreed',
      a: 'first',
      b: 'first',
    });
    expect(of({ espProposals: weaker }, { espProposals: { first: null, ...weaker } }).esp).toMatchObject({
      state: 'agreed',
      a: 'second',
      proposal: { encryption: 'aes-cbc' },
    });
  });

  it('names the part that has nothing in common', () => {
    expect(of({ ikeProposals: { first: { group: 14 } } }).ike).toEqual({ state: 'differ', parts: ['group'] });
    expect(of({ espProposals: { first: { keyBits: 128 } } }).esp).toEqual({
      state: 'differ',
      parts: ['key length'],
    });
    expect(of({ espProposals: { first: { encryption: 'aes-cbc', integrity: 'hmac-sha1-96' } } }).esp).toEqual(
      { state: 'differ', parts: ['encryption'] },
    );
  });

  it('names no part where each would fit but no whole proposal does', () => {
    const [rank, later] = ['a0', 'a1'];
    const mine = {
      first: { rank, encryption: 'aes-gcm-16', prf: 'hmac-sha2-256', group: 19, keyBits: 256 },
      other: { rank: later, encryption: 'aes-gcm-8', prf: 'hmac-sha2-256', group: 20, keyBits: 256 },
    } as const;
    const far = { first: { ...mine.first, group: 20 }, other: { ...mine.other, group: 19 } } as const;
    expect(of({ ikeProposals: mine }, { ikeProposals: far }).ike).toEqual({ state: 'differ', parts: [] });
  });

  it('knows nothing where an end proposes nothing, and lets child groups differ', () => {
    expect(of({ ikeProposals: null }).ike).toEqual({ state: 'unknown' });
    expect(of({ espProposals: { first: { group: 14 } } }).esp.state).toBe('agreed');
  });
});

describe('selectorsCover', () => {
  const of = (selector: MergePatch | null) =>
    selectorsCover(
      changed({ associations: { 'as-s0-s1': { a: { selectors: { loopbacks: selector } } } } }),
      'tn-s0-s1-a',
    );

  it('takes host prefixes and wider ones, and any port or the right one', () => {
    expect(of({})).toEqual({ state: 'covers' });
    expect(of({ local: '10.255.0.0/16', remote: '0.0.0.0/0', udpPort: 4789 })).toEqual({ state: 'covers' });
  });

  it('names the end and the addresses that are left out', () => {
    const gaps = [{ end: 'a', local: '10.255.0.1', remote: '10.255.0.2' }];
    expect(of({ local: '10.255.0.9/32' })).toEqual({ state: 'misses', gaps });
    expect(of({ remote: '2001:db8::/32' })).toEqual({ state: 'misses', gaps });
    expect(of({ udpPort: 8472 })).toEqual({ state: 'misses', gaps });
  });

  it('knows nothing of an end without selectors', () => {
    expect(of(null)).toEqual({ state: 'unknown' });
  });
});

describe('an association', () => {
  it('comes up as the builder makes it', () => {
    expect(canComeUp(changed({}), association)).toEqual({ up: true, reasons: [] });
  });

  it.each([
    [{ ikeVersion: 1 }, { code: 'ike-versions-differ', a: 1, b: 2 }],
    [
      { authentication: { method: 'certificate', vaultEntry: null } },
      { code: 'authentication-differs', a: 'certificate', b: 'pre-shared-key' },
    ],
    [
      { ikeProposals: { first: { group: 14 } } },
      { code: 'proposals-differ', layer: 'ike', parts: ['group'] },
    ],
    [
      { espProposals: { first: { keyBits: 128 } } },
      { code: 'proposals-differ', layer: 'esp', parts: ['key length'] },
    ],
    [{ start: 'answers' }, { code: 'nobody-starts' }],
  ] as const)('stays down with %j at one end', (a, reason) => {
    expect(ofAssociation(a as MergePatch)).toEqual([reason]);
  });

  it('needs one end that can be found and entered', () => {
    expect(ofLandings({ dynamic: true }, { dynamic: true })).toEqual([{ code: 'both-dynamic' }]);
    expect(ofLandings({ dynamic: true }, { dynamic: true, dynamicName: 'gul.saltmarsh.example' })).toEqual(
      [],
    );
    expect(ofLandings({ nat: {} }, { nat: {} })).toEqual([{ code: 'both-behind-nat' }]);
    expect(ofLandings({ nat: {} }, { nat: { forwarded: true } })).toEqual([]);
    expect(ofLandings({ dynamic: true }, { nat: {} })).toEqual([
      { code: 'neither-reachable', dynamic: 'a', behindNat: 'b' },
    ]);
  });

  it('needs the end that cannot be reached to be the one that starts', () => {
    expect(ofLandings({}, { nat: {} })).toEqual([
      { code: 'wrong-initiator', end: 'b', because: 'behind-nat' },
    ]);
    expect(ofLandings({}, { dynamic: true }, { b: { start: 'on-traffic' } })).toEqual([]);
  });

  it('falls to a transport that filters what it needs, and to nothing else', () => {
    const filtering = (filters: readonly string[], s0: MergePatch = {}) =>
      canComeUp(
        changed({ ...landings(s0, {}), transports: { coast: { filters: [...filters] } } }),
        association,
      ).reasons;
    expect(filtering(['udp-500'])).toEqual([
      { code: 'transport-filters', transport: 'coast', filter: 'udp-500' },
    ]);
    expect(filtering(['esp'])).toMatchObject([{ filter: 'esp' }]);
    expect(filtering(['udp-4500', 'fragments', 'multicast'])).toEqual([]);
    expect(filtering(['udp-4500', 'esp'], { nat: {} })).toMatchObject([{ filter: 'udp-4500' }]);
  });
});

describe('a tunnel', () => {
  const ends = (a: MergePatch, b: MergePatch = {}) => ofTunnel({ tunnels: { 'tn-s0-s1-a': { a, b } } });

  it('comes up as the builder makes it, bare or protected', () => {
    expect(canComeUp(changed({}), tunnel)).toEqual({ up: true, reasons: [] });
    expect(canComeUp(indexNetwork(pairDesign({ join: { protectedBy: false } })), tunnel).up).toBe(true);
  });

  it('needs the same VNI and port at both ends, where both are known', () => {
    expect(ends({ vni: 10_210 })).toEqual([{ code: 'vni-mismatch', a: 10_210, b: 10_000 }]);
    expect(ends({ vni: null })).toEqual([]);
    expect(ends({ udpPort: 8472 })).toEqual([{ code: 'udp-port-mismatch', a: 8472, b: 4789 }]);
    expect(ends({ udpPort: null })).toEqual([]);
  });

  it('needs a family that both endpoints have', () => {
    expect(codes(ofTunnel({ endpoints: { 'lo-s1': { ipv4: null, ipv6: '2001:db8::2/128' } } }))).toEqual([
      'families-differ',
    ]);
    expect(ofTunnel({ endpoints: { 'lo-s1': { ipv4: null } } })).toEqual([]);
  });

  it('needs its association up, on its devices and wide enough', () => {
    expect(ofTunnel({ associations: { 'as-s0-s1': { a: { ikeVersion: 1 } } } })).toEqual([
      {
        code: 'association-down',
        association: 'as-s0-s1',
        reasons: [{ code: 'ike-versions-differ', a: 1, b: 2 }],
      },
    ]);
    expect(
      codes(
        ofTunnel({
          associations: { 'as-s0-s1': { b: { selectors: { loopbacks: { local: '10.9.9.9/32' } } } } },
        }),
      ),
    ).toEqual(['selectors-miss']);
    expect(
      ofTunnel({
        endpoints: { 'lo-x': { device: 'sw-s1', name: 'lo-x', ipv4: '10.255.0.2/32' } },
        tunnels: { 'tn-s0-s1-a': { b: { endpoint: 'lo-x' } } },
      }),
    ).toEqual([{ code: 'ends-off-association', association: 'as-s0-s1', ends: ['b'] }]);
  });

  it('goes nowhere between two endpoints of one device', () => {
    expect(ends({}, { endpoint: 'lo-s0' })).toEqual([{ code: 'ends-on-one-device', device: 'fw-s0' }]);
  });

  it('is silent on an endpoint that the standby member keeps to itself', () => {
    const design = applyPatch(pairDesign({ hub: 'ha-pair' }), { endpoints: { 'lo-s0': { member: 2 } } });
    expect(canComeUp(indexNetwork(design), tunnel).reasons).toEqual([
      { code: 'endpoint-on-standby', end: 'a', device: 'fw-s0', member: 2 },
    ]);
  });

  it('falls bare to a transport that filters it', () => {
    const design = applyPatch(pairDesign({ join: { protectedBy: false } }), {
      transports: { coast: { filters: ['udp-4789'] } },
    });
    expect(canComeUp(indexNetwork(design), tunnel).reasons).toEqual([
      { code: 'transport-filters', transport: 'coast', filter: 'udp-4789' },
    ]);
  });
});
