import { describe, expect, it } from 'vitest';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, crossed, follow, packetTo, reasonsOf, verdictsOf } from './follow.ts';

const tunnel = 'tn-s0-s1-a';
const df = { dontFragment: true };
const profile = (oversizeDf: 'silent' | 'icmp' | 'fragment'): MergePatch => ({
  profiles: { make: { name: 'Make', oversizeDf } },
  devices: { 'fw-s0': { profile: 'make' } },
});
const espDf = (outerDf: 'copy' | 'set' | 'clear' | null): MergePatch => ({
  associations: { 'as-s0-s1': { a: { outerDf } } },
});
const vxlanDf = (outerDf: 'set' | 'clear' | 'inherit' | null): MergePatch => ({
  tunnels: { [tunnel]: { a: { outerDf } } },
});

describe('the bytes of a hop', () => {
  it('fill the pipe at 1396 bytes inside VXLAN and AES-GCM, and exceed it at 1500', () => {
    // RFC 4303 section 2.4 with RFC 7348 section 5 and RFC 4106: 1396 grows to 1500, 1500 to 1604.
    const fits = follow(pairDesign(), packetTo('h-s1-a', 1396, df));
    expect(crossed(fits, tunnel).wire).toMatchObject({ outerIpPacketBytes: 1500, mtuBytes: 1500 });
    expect(verdictsOf(fits).map(({ code }) => code)).toEqual(['delivered']);
    const large = follow(pairDesign(), packetTo('h-s1-a', 1500, df));
    expect(crossed(large, tunnel)).toMatchObject({
      wire: { outerIpPacketBytes: 1604, mtuBytes: 1500 },
      verdict: {
        code: 'dropped',
        byDesign: false,
        reason: {
          code: 'oversize',
          where: 'gateway',
          packetBytes: 1604,
          mtuBytes: 1500,
          largestBytes: 1396,
          answer: 'none',
          because: 'df-set',
          df: 'esp',
        },
        explains: [{ rule: 'frame-exceeds-path' }],
      },
    });
    expect(large.words).toContain('1604');
  });

  it('name each layer on each wire, tags and NAT traversal included', () => {
    const tagged = follow(pairDesign(), packetTo('h-s1-a', 1396));
    const ids = (id: string): readonly string[] => crossed(tagged, id).wire!.layers.map((layer) => layer.id);
    expect(ids('cb-h-s0-a')).not.toContain('outer-tag-1');
    expect(ids('cb-s0-up1')).toContain('outer-tag-1');
    expect(crossed(tagged, 'cb-s0-up1').wire).toMatchObject({ outerIpPacketBytes: 1396, frameBytes: 1418 });
    expect(ids(tunnel)).toEqual(expect.arrayContaining(['outer-ip', 'esp-header', 'vxlan', 'inner-packet']));
    const nat = changed(pairDesign(), { links: { 'ld-s0-coast': { nat: { forwarded: true } } } });
    // RFC 3948 section 2.1: 8 bytes of UDP more.
    expect(crossed(follow(nat, packetTo('h-s1-a', 1388)), tunnel).wire?.outerIpPacketBytes).toBe(1500);
  });

  it('are those of the sender’s access, while the far end’s access limits as well', () => {
    const dsl = changed(pairDesign(), { links: { 'ld-s1-coast': { accessOverhead: 'pppoe' } } });
    const there = follow(dsl, packetTo('h-s1-a', 1396));
    expect(crossed(there, tunnel).wire?.mtuBytes).toBe(1492);
    expect(reasonsOf(there)).toMatchObject([{ code: 'oversize', where: 'underway', mtuBytes: 1492 }]);
    const back = follow(dsl, { ...packetTo('h-s0-a', 1396), source: { host: 'h-s1-a' } });
    expect(reasonsOf(back)).toMatchObject([{ where: 'gateway', mtuBytes: 1492, largestBytes: 1388 }]);
    expect(crossed(back, tunnel).wire?.layers.map(({ id }) => id)).toContain('pppoe');
  });

  it('stay unknown where no proposal is agreed, which is said and not taken against the frame', () => {
    const open = changed(pairDesign(), { associations: { 'as-s0-s1': { b: { espProposals: null } } } });
    const trace = follow(open, packetTo('h-s1-a', 1500));
    expect(crossed(trace, tunnel).wire).toBeUndefined();
    expect(trace.assumptions.map(({ code }) => code)).toContain('bytes-unknown');
    expect(verdictsOf(trace)[0]?.code).toBe('delivered');
  });

  it('are compared with the ports alone where the transport’s MTU is unknown', () => {
    const open = changed(pairDesign(), { transports: { coast: { mtu: null } } });
    const trace = follow(open, packetTo('h-s1-a', 1396));
    expect(trace.assumptions.map(({ code }) => code)).toContain('mtu-unknown');
    expect(crossed(trace, tunnel).wire?.mtuBytes).toBe(1500);
  });
});

describe('a packet that is too large for the tunnel', () => {
  const large = packetTo('h-s1-a', 1500, df);
  const cut = {
    code: 'fragmented',
    // RFC 791 section 3.2: 1604 at 1500 is 1500 and 124.
    pieces: [{ packetBytes: 1500 }, { packetBytes: 124 }],
  };

  it('is cut where the ESP packet’s DF is clear, or copied from a VXLAN packet whose DF is clear', () => {
    for (const patches of [[espDf('clear')], [espDf('copy'), vxlanDf('clear')]]) {
      const trace = follow(changed(pairDesign(), ...patches), large);
      expect(verdictsOf(trace)).toMatchObject([{ ...cut, at: 3 }]);
      expect(crossed(trace, tunnel).decisions).toContainEqual(
        expect.objectContaining({ code: 'fragmented', because: 'df-clear', pieces: 2 }),
      );
    }
  });

  it('is dropped by the host’s own DF, though the outer one is clear, where the gateway answers the host', () => {
    const design = changed(pairDesign(), espDf('clear'), profile('icmp'));
    expect(reasonsOf(follow(design, large))).toMatchObject([
      { code: 'oversize', because: 'df-set', df: 'host', answer: 'icmp', largestBytes: 1396 },
    ]);
    expect(follow(design, large).words).toContain('host’s packet forbids');
    const mayBeCut = packetTo('h-s1-a', 1500, { dontFragment: false });
    expect(verdictsOf(follow(design, mayBeCut))).toMatchObject([cut]);
    // Of a limit underway the gateway knows nothing: the router there cuts what is marked as free to cut.
    const narrow = changed(design, { transports: { coast: { mtu: 1480 } } });
    expect(verdictsOf(follow(narrow, large))).toMatchObject([{ code: 'fragmented' }]);
  });

  it('is dropped by the DF that rules: of ESP, or through ESP of VXLAN, or through both of the host', () => {
    const reason = (host: boolean, ...patches: readonly MergePatch[]) =>
      reasonsOf(
        follow(changed(pairDesign(), ...patches), packetTo('h-s1-a', 1500, { dontFragment: host })),
      )[0];
    expect(reason(false, espDf('set'), vxlanDf('clear'))).toMatchObject({ df: 'esp' });
    expect(reason(false, espDf('copy'), vxlanDf('set'))).toMatchObject({ df: 'vxlan' });
    expect(reason(true, espDf('copy'), vxlanDf('inherit'))).toMatchObject({ df: 'vxlan' });
    expect(reason(false, espDf('copy'), vxlanDf('inherit'))).toBeUndefined();
  });

  it('is dropped where DF isn’t stated, and the trace says that this was assumed', () => {
    const esp = follow(changed(pairDesign(), espDf(null)), large);
    expect(reasonsOf(esp)).toMatchObject([{ code: 'oversize', df: 'esp' }]);
    expect(esp.assumptions.map(({ code }) => code)).toEqual(['esp-df', 'oversize-df']);
    const vxlan = follow(changed(pairDesign(), espDf('copy'), vxlanDf(null)), large);
    expect(vxlan.assumptions.map(({ code }) => code)).toContain('outer-df');
  });

  it('is judged by the VXLAN packet’s DF in transport mode and outside IPsec', () => {
    const transport: MergePatch = {
      associations: { 'as-s0-s1': { a: { mode: 'transport', outerDf: 'clear' }, b: { mode: 'transport' } } },
    };
    const inTransport = follow(changed(pairDesign(), transport), large);
    // RFC 4303 section 3.1.1: without the outer IPv4 header, 1584.
    expect(reasonsOf(inTransport)).toMatchObject([{ packetBytes: 1584, df: 'vxlan' }]);
    const bare = pairDesign({ join: { protectedBy: false, tunnel: { outerDf: 'clear' } } });
    const trace = follow(bare, large);
    expect(verdictsOf(trace)).toMatchObject([{ code: 'fragmented', pieces: [{}, { packetBytes: 70 }] }]);
    expect(trace.assumptions.map(({ code }) => code)).toEqual(['reassembly']);
  });

  it('is dropped without a word, told by ICMP, or cut, as the make of the gateway has it', () => {
    const of = (habit: 'silent' | 'icmp' | 'fragment') =>
      follow(changed(pairDesign(), profile(habit)), large);
    expect(reasonsOf(of('silent'))).toMatchObject([{ answer: 'none' }]);
    expect(reasonsOf(of('icmp'))).toMatchObject([{ answer: 'icmp', largestBytes: 1396 }]);
    expect(verdictsOf(of('fragment'))).toMatchObject([cut]);
    expect(of('silent').assumptions).toEqual([]);
    // RFC 1191 section 4: a packet that may be cut brings no message.
    const open = follow(changed(pairDesign(), profile('icmp')), packetTo('h-s1-a', 1500));
    expect(reasonsOf(open)).toMatchObject([{ answer: 'none' }]);
  });

  it('goes unanswered where the gateway itself isn’t told of a limit underway', () => {
    const narrow = (filters: readonly string[]): MergePatch => ({
      transports: { coast: { mtu: 1400, filters: [...filters] } },
    });
    const told = follow(changed(pairDesign(), profile('icmp'), narrow([])), large);
    expect(reasonsOf(told)).toMatchObject([{ where: 'underway', answer: 'icmp' }]);
    const hidden = follow(changed(pairDesign(), profile('icmp'), narrow(['packet-too-big'])), large);
    expect(reasonsOf(hidden)).toMatchObject([{ where: 'underway', answer: 'none' }]);
    const own: MergePatch = { transports: { coast: { filters: ['packet-too-big'] } } };
    const itself = follow(changed(pairDesign(), profile('icmp'), own), large);
    expect(reasonsOf(itself)).toMatchObject([{ where: 'gateway', answer: 'icmp' }]);
  });

  it('is cut by a gateway that ignores DF, which touches all traffic, as the trace says', () => {
    const ignoring = changed(pairDesign(), { devices: { 'fw-s0': { settings: { ignoreDf: true } } } });
    const trace = follow(ignoring, large);
    expect(verdictsOf(trace)).toMatchObject([cut]);
    expect(trace.assumptions).toMatchObject([{ code: 'ignore-df', element: { id: 'fw-s0' } }]);
    expect(trace.assumptions[0]!.words).toContain('everything it forwards');
  });

  it('is lost in pieces where the transport drops fragments', () => {
    const filters: MergePatch = { transports: { coast: { filters: ['fragments'] } } };
    const trace = follow(changed(pairDesign(), espDf('clear'), filters), large);
    expect(reasonsOf(trace)).toMatchObject([{ code: 'transport-filters', filter: 'fragments' }]);
    expect(crossed(trace, tunnel).pieces).toHaveLength(2);
  });

  it('is never cut underway in an outer IPv6 packet, whatever is set', () => {
    const v6: MergePatch = {
      transports: { coast: { families: [6] } },
      links: {
        'ld-s0-coast': { ipv4: null, ipv6: '2001:db8::10' },
        'ld-s1-coast': { ipv4: null, ipv6: '2001:db8::11' },
      },
      devices: { 'fw-s0': { settings: { ignoreDf: true } } },
    };
    const trace = follow(changed(pairDesign(), v6, espDf('clear')), packetTo('h-s1-a', 1500));
    // RFC 8200 section 3: 20 bytes more than around IPv4.
    expect(reasonsOf(trace)).toMatchObject([{ because: 'outer-ipv6', packetBytes: 1624, answer: 'none' }]);
  });

  it('with IPv6 inside may be cut outside: its own header is out of sight there', () => {
    const trace = follow(
      changed(pairDesign(), espDf('clear')),
      packetTo('h-s1-a', 1500, { version: 'ipv6' }),
    );
    expect(verdictsOf(trace)).toMatchObject([cut]);
  });
});

describe('a packet that its own sender must cut', () => {
  it('leaves in pieces of the port’s MTU, of which the longest is followed', () => {
    const trace = follow(pairDesign(), packetTo('h-s1-a', 4124));
    expect(trace.steps[0]!.pieces?.map(({ packetBytes }) => packetBytes)).toEqual([1500, 1500, 1164]);
    expect(crossed(trace, 'cb-h-s0-a').wire?.outerIpPacketBytes).toBe(1500);
    expect(reasonsOf(trace)).toMatchObject([{ code: 'oversize', packetBytes: 1604 }]);
    const kept = follow(pairDesign(), packetTo('h-s1-a', 4124, { sourceMtuBytes: 1396 }));
    expect(verdictsOf(kept)).toMatchObject([{ code: 'fragmented', at: 0 }]);
  });

  it('does not leave at all where cutting is forbidden', () => {
    for (const version of ['ipv4', 'ipv6'] as const) {
      const trace = follow(pairDesign(), packetTo('h-s1-a', 1600, { version, dontFragment: true }));
      expect(reasonsOf(trace)).toMatchObject([
        { code: 'exceeds-own-mtu', packetBytes: 1600, mtuBytes: 1500 },
      ]);
      expect(trace.steps).toHaveLength(1);
    }
  });
});

describe('a port of layer 2 with a smaller MTU', () => {
  it('drops without a word, wherever on the way it is', () => {
    const narrow = changed(hubDesign(1), { devices: { 'sw-s0': { ports: { p1: { mtu: 1300 } } } } });
    const trace = follow(narrow, packetTo('h-s1-a', 1396));
    expect(reasonsOf(trace)).toEqual([
      { code: 'oversize-frame', device: 'sw-s0', port: 'p1', packetBytes: 1396, mtuBytes: 1300 },
    ]);
    expect(crossed(trace, 'cb-s0-up1').wire?.mtuBytes).toBe(1300);
  });
});
