import { duplicateName } from '#engine/rules/duplicate-name.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

testRule(duplicateName, {
  accepted: {
    'names that differ': hubDesign(2, { segments: ['a', 'b'] }),
    'bridges of one name on different devices': pairDesign(),
    'hosts of one name at different sites': changed(pairDesign(), {
      devices: { 'h-s0-a': { name: 'camera-1' }, 'h-s1-a': { name: 'camera-1' } },
    }),
    'one gateway with one identity in several associations': hubDesign(3),
  },
  rejected: {
    'gateways of one name, however it is spelt': {
      design: changed(pairDesign(), { devices: { 'fw-s1': { name: 'FW-S0' } } }),
      findings: [
        {
          sentence: 'Two devices are called fw-s0',
          words: 'name used twice',
          severity: 'degrading',
          elements: ['devices/fw-s0', 'devices/fw-s1'],
          properties: ['devices/fw-s0: name', 'devices/fw-s1: name'],
          fixes: ['Rename one to fw-s0-2'],
        },
      ],
    },
    'hosts of one name at one site': {
      design: changed(pairDesign({ hostsPerSite: 2 }), { devices: { 'h-s0-a1': { name: 'h-s0-a' } } }),
      findings: [{ sentence: 'Two devices are called h-s0-a', fixes: ['Rename one to h-s0-a-2'] }],
    },
    'three tunnels of one name': {
      design: changed(pairDesign({ segments: ['a', 'b', 'c'] }), {
        tunnels: { 'tn-s0-s1-b': { name: 'tn-s0-s1-a' }, 'tn-s0-s1-c': { name: 'tn-s0-s1-a' } },
      }),
      findings: [
        {
          sentence: 'Three tunnels are called tn-s0-s1-a',
          severity: 'advisory',
          fixes: ['Rename all but one'],
        },
      ],
    },
    'segments of one letter': {
      design: changed(pairDesign({ segments: ['a', 'b'] }), { segments: { b: { letter: 'A' } } }),
      findings: [
        {
          sentence: 'Segment A and Segment B have the letter A',
          words: 'letter used twice',
          severity: 'advisory',
          elements: ['segments/a', 'segments/b'],
          fixes: ['Use B'],
        },
      ],
    },
    'gateways of one identity': {
      design: changed(hubDesign(2), {
        associations: { 'as-s0-s2': { b: { identity: 'fw-s1.saltmarsh.example' } } },
      }),
      findings: [
        {
          sentence: 'fw-s1 and fw-s2 identify themselves as fw-s1.saltmarsh.example',
          words: 'identity used twice',
          severity: 'blocking',
          elements: ['devices/fw-s1', 'devices/fw-s2'],
          properties: ['associations/as-s0-s1: b.identity', 'associations/as-s0-s2: b.identity'],
          fixes: ['Rename one to fw-s2.saltmarsh.example'],
        },
      ],
    },
  },
});
