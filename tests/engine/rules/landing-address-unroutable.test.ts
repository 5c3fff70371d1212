import { landingAddressUnroutable } from '#engine/rules/landing-address-unroutable.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const landing = (values: object, transport: object = {}) =>
  changed(pairDesign(), {
    links: { 'ld-s1-coast': values as never },
    transports: { coast: transport as never },
    associations: { 'as-s0-s1': { b: { start: 'starts' } } },
    segments: { a: { mtu: 1280 } },
  });
const both = { families: [4, 6] };

testRule(landingAddressUnroutable, {
  accepted: {
    'documentation addresses in an example': pairDesign(),
    'public addresses': changed(pairDesign(), {
      meta: { example: null },
      links: { 'ld-s0-coast': { ipv4: '8.0.0.1' }, 'ld-s1-coast': { ipv4: '9.0.0.1' } },
    }),
    'a private address on a transport of one’s own': landing({ ipv4: '10.64.8.2' }, { kind: 'own-routed' }),
    'a private address behind NAT': landing({ ipv4: '192.168.1.2', nat: {} }),
    'an address that is not known': landing({ ipv4: null }),
  },
  rejected: {
    'documentation addresses in a design that is no example, once': {
      design: changed(hubDesign(3), {
        meta: { example: null },
        links: { 'ld-s3-coast': { ipv4: '9.0.0.1' } },
      }),
      findings: [
        {
          sentence: 'Three outside addresses are for documentation only',
          words: 'placeholder address',
          severity: 'advisory',
          elements: ['links/ld-s0-coast', 'links/ld-s1-coast', 'links/ld-s2-coast'],
          fixes: ['Mark as an example'],
        },
      ],
    },
    'one documentation address, of IPv6': {
      design: changed(landing({ ipv6: '2001:db8::7' }, both), {
        meta: { example: false },
        links: { 'ld-s0-coast': { ipv4: '8.0.0.1' }, 'ld-s1-coast': { ipv4: '9.0.0.1' } },
      }),
      findings: [
        {
          sentence: 'Outside address 2001:db8::7 at Gullhaven is for documentation',
          properties: ['links/ld-s1-coast: ipv6'],
          fixes: ['Mark as an example'],
        },
      ],
    },
    'a link-local address': {
      design: landing({ ipv4: '169.254.7.7' }),
      findings: [
        {
          sentence: 'Outside address 169.254.7.7 at Gullhaven is link-local',
          words: 'address unusable',
          severity: 'blocking',
          elements: ['links/ld-s1-coast'],
          properties: ['links/ld-s1-coast: ipv4'],
          fixes: [],
        },
      ],
    },
    'a loopback address, even on a transport of one’s own': {
      design: landing({ ipv4: null, ipv6: '::1' }, { ...both, kind: 'own-routed' }),
      findings: [{ sentence: 'Outside address ::1 at Gullhaven is a loopback address', fixes: [] }],
    },
    'a private address on the internet without NAT': {
      design: landing({ ipv4: '192.168.1.2' }),
      findings: [
        {
          sentence: 'Private 192.168.1.2 at Gullhaven on Coastal access, without NAT',
          words: 'NAT not stated',
          severity: 'blocking',
          fixes: ['State the NAT'],
        },
      ],
    },
    'an address of the provider’s shared range without NAT': {
      design: landing({ ipv4: '100.64.1.2' }),
      findings: [
        {
          sentence: 'Shared 100.64.1.2 at Gullhaven on Coastal access, without NAT',
          fixes: ['State the NAT'],
        },
      ],
    },
    'an address of the shared range at an end that only answers, which NAT would stop altogether': {
      design: changed(landing({ ipv4: '100.64.1.2' }), {
        associations: { 'as-s0-s1': { b: { start: 'answers' } } },
      }),
      findings: [
        {
          sentence: 'Shared 100.64.1.2 at Gullhaven on Coastal access, without NAT',
          fixes: [],
        },
      ],
    },
  },
});
