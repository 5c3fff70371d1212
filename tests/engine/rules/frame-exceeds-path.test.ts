import { frameExceedsPath } from '#engine/rules/frame-exceeds-path.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const mtu = (value: number | null) => ({ segments: { a: { mtu: value } } });
const own = { transports: { coast: { kind: 'own-routed', trusted: true } } };
const fits = 1396;

testRule(frameExceedsPath, {
  accepted: {
    'a segment that fits to the byte': changed(pairDesign(), mtu(fits)),
    'a transport whose MTU is not known': changed(pairDesign(), mtu(9000), {
      transports: { coast: { mtu: null } },
    }),
    'proposals that are not known': changed(pairDesign(), mtu(1500), {
      associations: { 'as-s0-s1': { a: { espProposals: null } } },
    }),
    'a tunnel outside IPsec with 50 bytes to spare': changed(
      pairDesign({ join: { protectedBy: false } }),
      mtu(1450),
      own,
    ),
    'a segment whose hosts say nothing': changed(pairDesign(), mtu(null), {
      devices: { 'h-s0-a': { ports: { p1: { mtu: null } } }, 'h-s1-a': { ports: { p1: { mtu: null } } } },
    }),
    'a gateway that keeps to what fits': changed(pairDesign(), {
      forwarders: { 'br-s0-a': { gateway: { mtu: fits } } },
    }),
    'a larger transport with an outside line to match': changed(pairDesign(), mtu(1500), {
      transports: { coast: { mtu: 1604 } },
      devices: { 'fw-s0': { ports: { wan1: { mtu: 1604 } } }, 'fw-s1': { ports: { wan1: { mtu: 1604 } } } },
    }),
  },
  rejected: {
    'full-size packets over the internet': {
      design: changed(pairDesign(), mtu(1500)),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, tn-s0-s1-a takes 1396',
          words: 'packets too large',
          severity: 'blocking',
          elements: ['tunnels/tn-s0-s1-a', 'segments/a'],
          properties: ['segments/a: mtu'],
          mark: { kind: 'overhang', tunnel: 'tn-s0-s1-a', end: 'a', packetBytes: 1604, mtuBytes: 1500 },
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'one byte too much': {
      design: changed(pairDesign(), mtu(fits + 1)),
      findings: [
        {
          sentence: 'Segment A needs 1397-byte packets, tn-s0-s1-a takes 1396',
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'NAT in front of one end, which takes 8 bytes': {
      design: changed(pairDesign(), { links: { 'ld-s0-coast': { nat: {} } } }),
      findings: [
        {
          sentence: 'Segment A needs 1396-byte packets, tn-s0-s1-a takes 1388',
          fixes: ['Lower Segment A to 1388'],
        },
      ],
    },
    'PPPoE at the far end, which takes 8 bytes there': {
      design: changed(pairDesign(), { links: { 'ld-s1-coast': { accessOverhead: 'pppoe' } } }),
      findings: [
        {
          sentence: 'Segment A needs 1396-byte packets, tn-s0-s1-a takes 1388',
          mark: { kind: 'overhang', tunnel: 'tn-s0-s1-a', end: 'b', packetBytes: 1500, mtuBytes: 1492 },
          fixes: ['Lower Segment A to 1388', 'Raise WAN ports to 1508'],
        },
      ],
    },
    'a tag that stays on the frame, which takes 4 bytes': {
      design: changed(pairDesign(), {
        tunnels: { 'tn-s0-s1-a': { a: { innerTags: 'keep' }, b: { innerTags: 'keep' } } },
        forwarders: { 'br-s0-a': { circuits: { access: { tag: 'kept' } } } },
      }),
      findings: [
        {
          sentence: 'Segment A needs 1396-byte packets, tn-s0-s1-a takes 1392',
          fixes: ['Lower Segment A to 1392'],
        },
      ],
    },
    'one’s own transport, which can be raised': {
      design: changed(pairDesign(), own, mtu(1500)),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, tn-s0-s1-a takes 1396',
          fixes: ['Lower Segment A to 1396', 'Raise Coastal access to 1604'],
        },
      ],
    },
    'a WAN port that is smaller than its transport': {
      design: changed(pairDesign(), mtu(1500), { transports: { coast: { mtu: 9000 } } }),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, tn-s0-s1-a takes 1396',
          fixes: ['Lower Segment A to 1396', 'Raise WAN ports to 1604'],
        },
      ],
    },
    'several tunnels of one segment as one fault': {
      design: changed(hubDesign(3), mtu(1500)),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, three tunnels take less',
          elements: ['tunnels/tn-s0-s1-a', 'segments/a', 'tunnels/tn-s0-s2-a', 'tunnels/tn-s0-s3-a'],
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'hosts at 1500 on a segment that commits to nothing': {
      design: changed(pairDesign(), mtu(null)),
      findings: [
        {
          sentence: 'Two hosts send 1500-byte packets, tn-s0-s1-a takes 1396',
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'outer packets that may be fragmented, as a milder fault': {
      design: changed(pairDesign(), mtu(1500), {
        associations: { 'as-s0-s1': { a: { outerDf: 'clear' }, b: { outerDf: 'clear' } } },
      }),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, tn-s0-s1-a takes 1396',
          severity: 'degrading',
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'outer packets that may be fragmented, by gateways that mind the DF of the packet inside first': {
      design: changed(pairDesign(), mtu(1500), {
        associations: { 'as-s0-s1': { a: { outerDf: 'clear' }, b: { outerDf: 'clear' } } },
        profiles: { make: { name: 'Make', oversizeDf: 'icmp' } },
        devices: { 'fw-s0': { profile: 'make' }, 'fw-s1': { profile: 'make' } },
      }),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, tn-s0-s1-a takes 1396',
          severity: 'blocking',
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'gateways set to ignore DF, as a milder fault': {
      design: changed(pairDesign(), mtu(1500), {
        devices: { 'fw-s0': { settings: { ignoreDf: true } }, 'fw-s1': { settings: { ignoreDf: true } } },
      }),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, tn-s0-s1-a takes 1396',
          severity: 'degrading',
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'a gateway whose MTU is larger than what fits': {
      design: changed(pairDesign(), {
        forwarders: { 'br-s0-a': { gateway: { addresses: ['10.110.0.1/16'], mtu: 1500 } } },
      }),
      findings: [
        {
          sentence: 'br-110 at Head office sends 1500-byte packets, 1396 fit',
          words: 'gateway MTU large',
          severity: 'degrading',
          elements: ['forwarders/br-s0-a', 'segments/a'],
          properties: ['forwarders/br-s0-a: gateway.mtu'],
          fixes: ['Set its MTU to 1396'],
        },
      ],
    },
    'a router with too large an MTU on a segment that carries OSPF': {
      design: changed(pairDesign(), {
        segments: { a: { protocols: ['ipv4', 'ospf'] } },
        forwarders: { 'br-s0-a': { gateway: { mtu: 1500 } } },
      }),
      findings: [
        {
          sentence: 'br-110 at Head office sends 1500-byte packets, 1396 fit',
          severity: 'blocking',
          fixes: ['Set its MTU to 1396'],
        },
      ],
    },
    'a segment and its gateway, cured together': {
      design: changed(pairDesign(), mtu(1500), { forwarders: { 'br-s0-a': { gateway: { mtu: 1500 } } } }),
      findings: [
        {
          sentence: 'Segment A needs 1500-byte packets, tn-s0-s1-a takes 1396',
          fixes: ['Lower Segment A to 1396'],
        },
      ],
    },
    'IPv6 that would fall below its least, but offers no such MTU': {
      design: changed(pairDesign(), mtu(1400), {
        transports: { coast: { mtu: 1380 } },
        segments: { a: { protocols: ['ipv4', 'ipv6'] } },
      }),
      findings: [
        {
          sentence: 'Segment A needs 1400-byte packets, tn-s0-s1-a takes 1276',
          fixes: [],
        },
      ],
    },
  },
});
