import { associationBothDynamic } from '#engine/rules/association-both-dynamic.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const dynamic = changed(pairDesign(), {
  links: { 'ld-s0-coast': { dynamic: true, ipv4: null }, 'ld-s1-coast': { dynamic: true, ipv4: null } },
});
const sentence = 'Head office and Gullhaven both have changing addresses and no name';

testRule(associationBothDynamic, {
  accepted: {
    'fixed addresses': pairDesign(),
    'a changing address at one end': changed(pairDesign(), {
      links: { 'ld-s0-coast': { dynamic: true } },
    }),
    'a changing address that a name follows': changed(dynamic, {
      links: { 'ld-s0-coast': { dynamicName: 'ho.saltmarsh.example' } },
    }),
  },
  rejected: {
    'changing addresses at both ends': {
      design: dynamic,
      findings: [
        {
          sentence,
          words: 'both dynamic',
          severity: 'blocking',
          elements: ['associations/as-s0-s1', 'links/ld-s0-coast', 'links/ld-s1-coast'],
          properties: ['links/ld-s0-coast: dynamic', 'links/ld-s1-coast: dynamic'],
          fixes: [],
        },
      ],
    },
    'changing addresses where another line has a fixed one': {
      design: changed(dynamic, {
        devices: { 'fw-s0': { ports: { wan2: { number: 9, name: 'wan2', role: 'wan', mtu: 1500 } } } },
        links: {
          'ld-s0-leased': {
            kind: 'landing',
            device: 'fw-s0',
            port: 'wan2',
            transport: 'coast',
            ipv4: '198.51.100.99',
          },
        },
        associations: { 'as-s0-s1': { b: { start: 'starts' } } },
      }),
      findings: [{ sentence, fixes: ['Use Coastal access'] }],
    },
  },
});
