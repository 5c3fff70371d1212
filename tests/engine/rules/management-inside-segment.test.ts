import { managementInsideSegment } from '#engine/rules/management-inside-segment.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const managed = (devices: { readonly [id: string]: string }) =>
  changed(pairDesign(), {
    devices: Object.fromEntries(
      Object.entries(devices).map(([id, managementAddress]) => [id, { managementAddress }]),
    ),
  });

testRule(managementInsideSegment, {
  accepted: {
    'addresses beyond the segments': managed({ 'fw-s0': '10.9.0.1', 'sw-s0': '2001:db8:9::1' }),
    'a segment that stays at one site': changed(managed({ 'fw-s0': '10.110.0.5' }), {
      segments: { a: { sites: { s1: null } } },
    }),
  },
  rejected: {
    'a gateway managed inside a segment': {
      design: managed({ 'fw-s0': '10.110.0.5' }),
      findings: [
        {
          sentence: 'fw-s0 is managed inside stretched segment A',
          words: 'managed in segment',
          severity: 'degrading',
          elements: ['devices/fw-s0', 'segments/a'],
          properties: ['devices/fw-s0: managementAddress'],
          fixes: [],
        },
      ],
    },
    'three devices, once': {
      design: managed({ 'fw-s0': '10.110.0.5', 'sw-s0': '10.110.0.6', 'sw-s1': '10.110.0.7' }),
      findings: [{ sentence: 'Three devices are managed inside stretched segment A', fixes: [] }],
    },
  },
});
