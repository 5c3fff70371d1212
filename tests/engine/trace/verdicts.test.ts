import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import {
  arpFrom,
  changed,
  crossed,
  follow,
  groupFrom,
  packetTo,
  reasonsOf,
  receivers,
  reservedFrom,
  verdictsOf,
} from './follow.ts';

const ping = packetTo('h-s1-a', 84);
const tunnel = 'tn-s0-s1-a';
const reason = (...patches: readonly MergePatch[]) =>
  reasonsOf(follow(changed(pairDesign(), ...patches), ping))[0];

describe('a frame that a tunnel doesn’t bring to the far site', () => {
  it('crosses the transport and ends at an endpoint that has no such VNI, or another UDP port', () => {
    const trace = follow(changed(pairDesign(), { tunnels: { [tunnel]: { b: { vni: 10_210 } } } }), ping);
    expect(reasonsOf(trace)).toEqual([
      { code: 'no-such-vni', tunnel, device: 'fw-s1', sent: 10_000, has: 10_210 },
    ]);
    expect(crossed(trace, tunnel).wire?.outerIpPacketBytes).toBe(188);
    expect(reason({ tunnels: { [tunnel]: { a: { udpPort: 8472 } } } })).toEqual({
      code: 'no-such-udp-port',
      tunnel,
      device: 'fw-s1',
      sent: 8472,
      has: 4789,
    });
  });

  it('never leaves the gateway while the association can’t come up, whose reasons are named', () => {
    const trace = follow(
      changed(pairDesign(), {
        associations: { 'as-s0-s1': { b: { ikeVersion: 1 }, a: { start: 'answers' } } },
      }),
      ping,
    );
    expect(reasonsOf(trace)).toMatchObject([
      { code: 'association-down', reasons: [{ code: 'ike-versions-differ' }, { code: 'nobody-starts' }] },
    ]);
    expect(crossed(trace, tunnel).wire).toBeUndefined();
    expect(trace.words).toContain('IKE');
  });

  it('never leaves the gateway where selectors leave the endpoints out', () => {
    expect(
      reason({
        associations: { 'as-s0-s1': { a: { selectors: { loopbacks: { remote: '10.255.0.9/32' } } } } },
      }),
    ).toMatchObject({ code: 'tunnel-down', reasons: [{ code: 'selectors-miss' }] });
  });

  it('is lost underway where the transport filters VXLAN', () => {
    const bare = changed(pairDesign({ join: { protectedBy: false } }), {
      transports: { coast: { filters: ['udp-4789'] } },
    });
    expect(reasonsOf(follow(bare, ping))).toMatchObject([
      { code: 'transport-filters', filter: 'udp-4789', transport: 'coast' },
    ]);
  });

  it('ends where no forwarder holds the tunnel', () => {
    expect(reason({ forwarders: { 'br-s1-a': { circuits: { [tunnel]: null } } } })).toEqual({
      code: 'tunnel-unclaimed',
      tunnel,
      device: 'fw-s1',
    });
    expect(reason({ forwarders: { 'br-s1-a': null } })).toMatchObject({ code: 'tunnel-unclaimed' });
  });

  it('is discarded with a tag that the receiving end doesn’t take', () => {
    const whole: MergePatch = { circuits: { access: { vlans: 'all' } } };
    const patch: MergePatch = {
      forwarders: { 'br-s0-a': whole },
      tunnels: { [tunnel]: { a: { innerTags: 'keep' } } },
    };
    expect(reason(patch)).toEqual({ code: 'tag-discarded', tunnel, device: 'fw-s1', vlan: 110 });
  });
});

describe('a frame that layer 2 doesn’t let on', () => {
  it('ends at a trunk or a gateway’s port that doesn’t allow its VLAN', () => {
    expect(reason({ devices: { 'sw-s0': { ports: { p1: { allowedVlans: [120] } } } } })).toEqual({
      code: 'vlan-not-allowed',
      device: 'sw-s0',
      port: 'p1',
      vlan: 110,
      direction: 'out',
    });
    expect(reason({ devices: { 'fw-s0': { ports: { lan1: { allowedVlans: [120] } } } } })).toMatchObject({
      code: 'vlan-not-allowed',
      device: 'fw-s0',
      direction: 'in',
    });
  });

  it('ends where no circuit claims it, and at a trunk that takes no untagged frames', () => {
    expect(reason({ forwarders: { 'br-s0-a': { circuits: { access: { vlans: [130] } } } } })).toMatchObject({
      code: 'no-circuit',
      device: 'fw-s0',
      port: 'lan1',
      vlan: 110,
    });
    const untagged = { device: 'sw-s0', port: 'p1' };
    expect(reasonsOf(follow(pairDesign(), { ...ping, source: untagged }))).toEqual([
      { code: 'no-native-vlan', ...untagged },
    ]);
  });

  it('ends with a tag at an access port', () => {
    expect(reasonsOf(follow(pairDesign(), { ...ping, tags: [110] }))).toEqual([
      { code: 'tag-at-access-port', device: 'sw-s0', port: 'p2', vlan: 110 },
    ]);
  });

  it('ends at shut ports and at hosts without a cable', () => {
    const shut = follow(
      changed(pairDesign(), { devices: { 'h-s0-a': { ports: { p1: { shut: true } } } } }),
      ping,
    );
    expect(verdictsOf(shut)).toMatchObject([
      { code: 'dropped', byDesign: true, reason: { code: 'port-shut', device: 'h-s0-a' } },
    ]);
    expect(reason({ links: { 'cb-h-s0-a': null } })).toEqual({ code: 'not-cabled', device: 'h-s0-a' });
  });

  it('ends on the silent member of a pair, by design, while the active one takes it on', () => {
    const trace = follow(pairDesign({ hub: 'ha-pair' }), arpFrom('h-s0-a'));
    expect(crossed(trace, 'cb-s0-up2')).toMatchObject({
      to: { collection: 'devices', id: 'fw-s0', port: 'lan1', member: 2 },
      verdict: { code: 'dropped', byDesign: true, reason: { code: 'standby', member: 2 } },
    });
    expect(receivers(trace)).toEqual({ 'h-s1-a': 1 });
  });

  it('ends where isolation keeps circuits apart', () => {
    const trace = follow(meshDesign(3, { join: { isolation: 'mesh' } }), arpFrom('h-s0-a'));
    const kept = verdictsOf(trace).filter((verdict) => verdict.code === 'dropped');
    expect(kept).toHaveLength(2);
    expect(kept).toMatchObject([
      { byDesign: true, reason: { code: 'isolation', group: 'mesh', device: 'fw-s1' } },
      { byDesign: true, reason: { code: 'isolation', group: 'mesh', device: 'fw-s2' } },
    ]);
    expect(receivers(trace)).toEqual({ 'h-s1-a': 1, 'h-s2-a': 1 });
  });

  it('ends at the split horizon of multipoint endpoints', () => {
    const profile: MergePatch = {
      profiles: { mp: { name: 'Multipoint', vniScope: 'multipoint' } },
      devices: { 'fw-s0': { profile: 'mp' } },
      tunnels: { 'tn-s0-s2-a': { a: { vni: 10_000 }, b: { vni: 10_000 } } },
    };
    const trace = follow(changed(hubDesign(2), profile), arpFrom('h-s1-a'));
    expect(reasonsOf(trace)).toContainEqual({ code: 'split-horizon', device: 'fw-s0', forwarder: 'br-s0-a' });
    expect(receivers(trace)).toEqual({ 'h-s0-a': 1 });
  });

  it('ends at a port that spanning tree blocks', () => {
    const ring: MergePatch = {
      devices: {
        'sw-s0': { settings: { spanningTree: { mode: 'on', priority: 4096 } } },
        'sw-more': {
          kind: 'switch',
          site: 's0',
          name: 'sw-more',
          settings: { spanningTree: { mode: 'on' } },
          ports: {
            p1: { number: 1, role: 'lan', mode: 'trunk' },
            p2: { number: 2, role: 'lan', mode: 'trunk' },
          },
        },
      },
    };
    const cables: MergePatch = {
      devices: { 'sw-s0': { ports: { x1: trunk(21), x2: trunk(22) } } },
      links: {
        'cb-x1': { kind: 'cable', a: { device: 'sw-s0', port: 'x1' }, b: { device: 'sw-more', port: 'p1' } },
        'cb-x2': { kind: 'cable', a: { device: 'sw-s0', port: 'x2' }, b: { device: 'sw-more', port: 'p2' } },
      },
    };
    const trace = follow(changed(pairDesign(), ring, cables), arpFrom('h-s0-a'));
    expect(crossed(trace, 'cb-x2').verdict).toMatchObject({
      byDesign: true,
      reason: { code: 'spanning-tree', device: 'sw-more', port: 'p2' },
    });
    expect(trace.storm).toBeUndefined();
    // A blocked port still listens for BPDUs.
    const bpdu = follow(changed(pairDesign(), ring, cables), {
      ...reservedFrom('h-s0-a', '00'),
      source: { device: 'sw-more', port: 'p2' },
    });
    expect(verdictsOf(bpdu)).toMatchObject([{ code: 'delivered', to: { id: 'sw-more' } }]);
  });
});

const trunk = (number: number): MergePatch => ({ number, role: 'lan', mode: 'trunk' });

describe('a cross-connect', () => {
  const crossConnect = (policy: MergePatch): MergePatch => ({
    forwarders: { 'br-s0-a': { kind: 'cross-connect', policy } },
  });
  const rule = (more: MergePatch): MergePatch => ({
    rule: { rank: 'a0', action: 'permit', direction: 'both', frames: 'any', ...(more as object) },
  });

  it('drops by default what no rule permits, and says which forwarder', () => {
    expect(reason(crossConnect({}))).toEqual({
      code: 'filter',
      device: 'fw-s0',
      forwarder: 'br-s0-a',
      direction: 'to-tunnel',
    });
    const back = follow(changed(pairDesign(), crossConnect({})), {
      ...packetTo('h-s0-a', 84),
      source: { host: 'h-s1-a' },
    });
    expect(reasonsOf(back)).toMatchObject([{ code: 'filter', direction: 'from-tunnel' }]);
  });

  it('lets the very frames pass that a rule is about: one protocol, one port, one address, one kind', () => {
    const passes = (more: MergePatch, probe = ping): boolean =>
      reasonsOf(follow(changed(pairDesign(), crossConnect(rule(more))), probe)).length === 0;
    const web = packetTo('h-s1-a', 84, { protocol: 6, destinationPort: 443 });
    expect(passes({ frames: 'ipv4' })).toBe(true);
    expect(passes({ frames: 'ipv6' })).toBe(false);
    expect(passes({ frames: 'ipv4', protocol: 6 }, web)).toBe(true);
    expect(passes({ frames: 'ipv4', protocol: 17 }, web)).toBe(false);
    expect(passes({ frames: 'ipv4', ports: [443] }, web)).toBe(true);
    expect(passes({ frames: 'ipv4', ports: [80] }, web)).toBe(false);
    expect(passes({ frames: 'ipv4', sources: ['10.110.0.20/32'], destinations: ['10.110.1.0/24'] })).toBe(
      true,
    );
    expect(passes({ frames: 'ipv4', sources: ['10.110.9.0/24'] })).toBe(false);
    expect(passes({ frames: 'arp' }, arpFrom('h-s0-a'))).toBe(true);
    expect(passes({ frames: 'broadcast' }, arpFrom('h-s0-a'))).toBe(true);
    expect(passes({ frames: 'multicast' }, arpFrom('h-s0-a'))).toBe(false);
    expect(passes({ frames: 'ethertype', ethertype: 0x0806 }, arpFrom('h-s0-a'))).toBe(true);
    expect(passes({ frames: 'any', direction: 'from-tunnel' })).toBe(false);
  });

  it('takes what goes from port to port for traffic towards a tunnel, as its rules have it', () => {
    const more: MergePatch = {
      forwarders: {
        'br-s0-a': { circuits: { more: { kind: 'port', rank: 'z', port: 'lan2', vlans: 'untagged' } } },
      },
    };
    const reached = (direction: string) =>
      receivers(
        follow(changed(pairDesign(), more, crossConnect(rule({ direction }))), {
          ...arpFrom('h-s0-a'),
          source: { device: 'fw-s0', port: 'lan2' },
        }),
      );
    expect(reached('to-tunnel')).toEqual({ 'h-s0-a': 1, 'h-s1-a': 1 });
    expect(reached('from-tunnel')).toEqual({});
  });

  it('names the rule that denies a frame, and the rule that permits it', () => {
    expect(reason(crossConnect(rule({ action: 'deny' })))).toMatchObject({ code: 'filter', rule: 'rule' });
    const trace = follow(changed(pairDesign(), crossConnect(rule({}))), ping);
    expect(crossed(trace, 'cb-s0-up1').decisions).toContainEqual(
      expect.objectContaining({ code: 'permitted', rule: 'rule' }),
    );
  });

  it('takes what the design leaves open against the frame: a permit doesn’t help, a denial does stop', () => {
    const nameless: MergePatch = { devices: { 'h-s0-a': { addresses: null } } };
    expect(reason(nameless, crossConnect(rule({ sources: ['10.110.0.0/16'] })))).toMatchObject({
      code: 'filter',
    });
    const denying = changed(
      pairDesign(),
      nameless,
      crossConnect({
        first: { rank: 'a0', action: 'deny', direction: 'both', frames: 'ipv4', sources: ['10.9.0.0/16'] },
        second: { rank: 'a1', action: 'permit', direction: 'both', frames: 'any' },
      }),
    );
    const trace = follow(denying, ping);
    expect(reasonsOf(trace)).toMatchObject([{ code: 'filter', rule: 'first' }]);
    expect(trace.assumptions.map(({ code }) => code)).toContain('address-unknown');
  });
});

describe('multicast', () => {
  const lowered: MergePatch = {
    profiles: { make: { name: 'Make', multicastTtl: 'lowered' } },
    devices: { 'fw-s0': { profile: 'make' } },
  };
  const kept: MergePatch = {
    profiles: { make: { name: 'Make', multicastTtl: 'kept' } },
    devices: { 'fw-s0': { profile: 'make' }, 'fw-s1': { profile: 'make' } },
  };

  it('with a hop limit of 1 dies where the gateway lowers it though it only bridges', () => {
    const hello = groupFrom('h-s0-a', '224.0.0.5', { hopLimit: 1 });
    expect(reasonsOf(follow(changed(pairDesign(), lowered), hello))).toEqual([
      { code: 'hop-limit-zero', device: 'fw-s0', forwarder: 'br-s0-a' },
    ]);
    const certain = follow(changed(pairDesign(), kept), hello);
    expect(receivers(certain)).toEqual({ 'h-s1-a': 1 });
    expect(certain.assumptions).toEqual([]);
  });

  it('is taken to keep its hop limit where nothing is known, with a word on what that means', () => {
    const hello = groupFrom('h-s0-a', '224.0.0.5', { hopLimit: 1 });
    const routing: MergePatch = { devices: { 'fw-s0': { settings: { multicastRouting: true } } } };
    const trace = follow(changed(pairDesign(), routing), hello);
    expect(receivers(trace)).toEqual({ 'h-s1-a': 1 });
    expect(trace.assumptions).toMatchObject([
      { code: 'multicast-ttl', element: { id: 'fw-s0' } },
      { code: 'multicast-ttl', element: { id: 'fw-s1' } },
    ]);
    expect(trace.assumptions[0]!.words).toContain('multicast routing on');
    expect(trace.assumptions[1]!.words).not.toContain('multicast routing on');
  });

  it('that must arrive with 255 is discarded by its receiver once it was lowered', () => {
    const advert = groupFrom('h-s0-a', '224.0.0.18', { hopLimit: 255, requiredHopLimit: 255 });
    const trace = follow(changed(pairDesign(), lowered), advert);
    expect(reasonsOf(trace)).toEqual([
      { code: 'hop-limit-required', device: 'h-s1-a', hopLimit: 254, requires: 255 },
    ]);
    expect(crossed(trace, tunnel).hopLimit).toBe(254);
    const unicast = follow(changed(pairDesign(), lowered), packetTo('h-s1-a', 84, { hopLimit: 1 }));
    expect(receivers(unicast)).toEqual({ 'h-s1-a': 1 });
  });

  it('is dropped where a forwarder is told to, while broadcasts pass', () => {
    const drop: MergePatch = { forwarders: { 'br-s0-a': { multicast: 'drop' } } };
    const design = changed(pairDesign(), drop);
    expect(reasonsOf(follow(design, groupFrom('h-s0-a', '239.1.1.1')))).toEqual([
      { code: 'multicast-dropped', device: 'fw-s0', forwarder: 'br-s0-a' },
    ]);
    expect(receivers(follow(design, arpFrom('h-s0-a')))).toEqual({ 'h-s1-a': 1 });
  });

  it('to other than local groups passes a snooping forwarder on the assumption that it was asked for', () => {
    const design = changed(pairDesign(), { forwarders: { 'br-s0-a': { multicast: 'snoop' } } });
    const codes = (group: string) =>
      follow(design, groupFrom('h-s0-a', group)).assumptions.map(({ code }) => code);
    expect(codes('239.1.1.1')).toEqual(['snooping']);
    expect(codes('224.0.0.5')).toEqual([]);
    expect(codes('ff02::5')).toEqual([]);
  });
});

describe('frames to reserved groups', () => {
  const made = (octet: string, treatment: 'drop' | 'pass' | 'peer'): MergePatch => ({
    profiles: { make: { name: 'Make', reservedGroups: { [octet]: treatment } } },
    devices: Object.fromEntries(['sw-s0', 'fw-s0', 'fw-s1', 'sw-s1'].map((id) => [id, { profile: 'make' }])),
  });

  it('end at the first bridge as the standard has it, and the trace says that equipment differs', () => {
    for (const octet of ['00', '01', '02', '03', '0e', '0f']) {
      const trace = follow(pairDesign(), reservedFrom('h-s0-a', octet));
      expect(verdictsOf(trace)).toMatchObject([
        { byDesign: true, reason: { code: 'reserved-group', device: 'sw-s0', octet, says: 'standard' } },
      ]);
      expect(trace.assumptions.map(({ code }) => code)).toEqual(['reserved-group']);
    }
  });

  it('pass, end or are taken as the profile says for each address', () => {
    const passing = changed(pairDesign(), made('0e', 'pass'));
    expect(receivers(follow(passing, reservedFrom('h-s0-a', '0e')))).toEqual({ 'h-s1-a': 1 });
    expect(receivers(follow(passing, reservedFrom('h-s0-a', '03')))).toEqual({});
    const dropping = follow(changed(pairDesign(), made('0e', 'drop')), reservedFrom('h-s0-a', '0e'));
    expect(dropping.assumptions).toEqual([]);
    expect(reasonsOf(dropping)).toMatchObject([{ says: 'profile' }]);
    const peer = follow(changed(pairDesign(), made('0e', 'peer')), reservedFrom('h-s0-a', '0e'));
    expect(receivers(peer)).toEqual({ 'sw-s0': 1 });
  });

  it('are not taken by the member of a pair that stands by', () => {
    const pair = changed(pairDesign({ hub: 'ha-pair' }), {
      profiles: {
        pass: { name: 'Passing', reservedGroups: { '0e': 'pass' } },
        peer: { name: 'Listening', reservedGroups: { '0e': 'peer' } },
      },
      devices: {
        'sw-s0': { profile: 'pass', ports: { p1: { nativeVlan: 110 }, p2: { nativeVlan: 110 } } },
        'fw-s0': { profile: 'peer' },
      },
    });
    const trace = follow(pair, reservedFrom('h-s0-a', '0e'));
    expect(crossed(trace, 'cb-s0-up1').verdict).toMatchObject({ code: 'delivered', to: { id: 'fw-s0' } });
    expect(crossed(trace, 'cb-s0-up2').verdict).toMatchObject({ reason: { code: 'standby', member: 2 } });
  });

  it('are taken by a bridge in spanning tree, and of slow protocols by an aggregate', () => {
    const tree = changed(pairDesign(), {
      devices: { 'sw-s0': { settings: { spanningTree: { mode: 'on' } } } },
    });
    expect(receivers(follow(tree, reservedFrom('h-s0-a', '00')))).toEqual({ 'sw-s0': 1 });
    const lag = changed(pairDesign(), { devices: { 'sw-s0': { ports: { p2: { aggregation: 'lag' } } } } });
    expect(receivers(follow(lag, reservedFrom('h-s0-a', '02')))).toEqual({ 'sw-s0': 1 });
    expect(receivers(follow(lag, reservedFrom('h-s0-a', '0e')))).toEqual({});
  });
});

describe('tags', () => {
  it('are told where they come off, stay or change', () => {
    const codes = (patch: MergePatch): readonly string[] =>
      crossed(follow(changed(pairDesign(), patch), ping), 'cb-s0-up1').decisions.map(({ code }) => code);
    const circuit = (more: MergePatch): MergePatch => ({
      forwarders: { 'br-s0-a': { circuits: { access: more } } },
    });
    expect(codes({})).toContain('tag-removed');
    expect(codes(circuit({ vlans: 'all' }))).toEqual(expect.arrayContaining(['tag-kept', 'tag-stripped']));
    expect(codes(circuit({ tag: 'kept', translate: { '110': 130 } }))).toContain('tag-translated');
  });

  it('come off before a tunnel that doesn’t say, which is assumed and said', () => {
    const open = changed(pairDesign(), {
      forwarders: { 'br-s0-a': { circuits: { access: { vlans: 'all' } } } },
      tunnels: { [tunnel]: { a: { innerTags: null } } },
    });
    expect(follow(open, ping).assumptions.map(({ code }) => code)).toEqual(['inner-tags']);
  });

  it('cost four bytes inside the tunnel where both ends keep them', () => {
    const keep: MergePatch = { innerTags: 'keep' };
    const whole: MergePatch = { circuits: { access: { vlans: 'all' } } };
    const design = changed(pairDesign(), {
      forwarders: { 'br-s0-a': whole, 'br-s1-a': whole },
      tunnels: { [tunnel]: { a: keep, b: keep } },
    });
    const trace = follow(design, packetTo('h-s1-a', 1396));
    expect(crossed(trace, tunnel)).toMatchObject({ tags: [110], wire: { outerIpPacketBytes: 1504 } });
    expect(reasonsOf(trace)).toMatchObject([{ code: 'oversize', largestBytes: 1392 }]);
  });
});
