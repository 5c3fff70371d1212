import { identityFollowsAddress } from '#engine/rules/identity-follows-address.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const end = (landing: object, b: object) =>
  changed(pairDesign(), {
    associations: { 'as-s0-s1': { b: { start: 'starts', ...b } } },
    links: { 'ld-s1-coast': landing as never },
    segments: { a: { mtu: 1280 } },
  });
const dynamic = { dynamic: true, ipv4: null };

testRule(identityFollowsAddress, {
  accepted: {
    'a name behind a changing address': end(dynamic, {}),
    'a fixed public address as identity': end({}, { identity: '198.51.100.11' }),
    'a certificate that names the end': end(dynamic, {
      identity: null,
      authentication: { method: 'certificate', vaultEntry: null },
    }),
  },
  rejected: {
    'a changing address as identity': {
      design: end(dynamic, { identity: '198.51.100.11' }),
      findings: [
        {
          sentence: 'Gullhaven identifies itself by 198.51.100.11, which changes',
          words: 'identity may change',
          severity: 'degrading',
          elements: ['associations/as-s0-s1', 'links/ld-s1-coast'],
          properties: ['associations/as-s0-s1: b.identity'],
          fixes: ['Use fw-s1.saltmarsh.example'],
        },
      ],
    },
    'an inside address behind NAT as identity': {
      design: end({ nat: {} }, { identity: '192.168.1.2' }),
      findings: [
        {
          sentence: 'Gullhaven identifies itself by 192.168.1.2, which NAT hides',
          fixes: ['Use fw-s1.saltmarsh.example'],
        },
      ],
    },
    'a changing address with a key and no identity': {
      design: end(dynamic, { identity: null }),
      findings: [
        {
          sentence: 'Gullhaven has a changing address and no identity',
          words: 'identity not stated',
          severity: 'advisory',
          fixes: ['Use fw-s1.saltmarsh.example'],
        },
      ],
    },
  },
});
