import type { MergePatch } from '#engine/model/merge-patch.ts';
import { associationWithoutSecondPath } from '#engine/rules/association-without-second-path.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const ring = (...sites: readonly string[]): MergePatch => ({
  transports: { ring: { name: 'Terminal ring', kind: 'own-routed', families: [4] } },
  devices: Object.fromEntries(
    sites.map((site) => [`fw-${site}`, { ports: { wan9: { number: 9, role: 'wan' } } }]),
  ),
  links: Object.fromEntries(
    sites.map((site, i) => [
      `ld-${site}-ring`,
      { kind: 'landing', device: `fw-${site}`, port: 'wan9', transport: 'ring', ipv4: `10.64.8.${2 + i}` },
    ]),
  ),
});

testRule(associationWithoutSecondPath, {
  accepted: {
    'one transport': pairDesign(),
    'a second transport at one end alone': changed(pairDesign(), ring('s0')),
    'an association that says nothing of its landings, and may use all': changed(
      pairDesign(),
      ring('s0', 's1'),
      {
        associations: { 'as-s0-s1': { a: { via: null }, b: { via: null } } },
      },
    ),
    'an association that may turn to both': changed(pairDesign(), ring('s0', 's1'), {
      associations: {
        'as-s0-s1': {
          a: { via: { next: { rank: 'z', landing: 'ld-s0-ring' } } },
          b: { via: { next: { rank: 'z', landing: 'ld-s1-ring' } } },
        },
      },
    }),
  },
  rejected: {
    'a second transport that both ends leave out': {
      design: changed(pairDesign(), ring('s0', 's1')),
      findings: [
        {
          sentence: 'as-s0-s1 uses Coastal access alone, not Terminal ring',
          words: 'second path unused',
          severity: 'degrading',
          elements: ['associations/as-s0-s1', 'transports/ring'],
          properties: ['associations/as-s0-s1: a.via', 'associations/as-s0-s1: b.via'],
          fixes: ['Add Terminal ring'],
        },
      ],
    },
    'several associations as one fault': {
      design: changed(hubDesign(2), ring('s0', 's1', 's2')),
      findings: [
        {
          sentence: 'Two associations use Coastal access alone, not Terminal ring',
          elements: ['associations/as-s0-s1', 'associations/as-s0-s2', 'transports/ring'],
          fixes: ['Add Terminal ring'],
        },
      ],
    },
    'one that only one end leaves out': {
      design: changed(pairDesign(), ring('s0', 's1'), {
        associations: { 'as-s0-s1': { b: { via: { next: { rank: 'z', landing: 'ld-s1-ring' } } } } },
      }),
      findings: [
        { sentence: 'as-s0-s1 uses Coastal access alone, not Terminal ring', fixes: ['Add Terminal ring'] },
      ],
    },
  },
});
