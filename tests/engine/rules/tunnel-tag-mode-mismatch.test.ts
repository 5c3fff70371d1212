import { tunnelTagModeMismatch } from '#engine/rules/tunnel-tag-mode-mismatch.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const id = 'tn-s0-s1-a';
const keepAtHead = { tunnels: { [id]: { a: { innerTags: 'keep' } } } };
const trunk = {
  forwarders: {
    'br-s0-a': { circuits: { access: { vlans: [110, 120] } } },
    'br-s1-a': { circuits: { access: { vlans: [110, 120] } } },
  },
};

testRule(tunnelTagModeMismatch, {
  accepted: {
    'modes that differ where every frame is untagged inside the bridge': changed(pairDesign(), keepAtHead),
    'a trunk through a tunnel that keeps tags at both ends': changed(pairDesign(), trunk, {
      tunnels: { [id]: { a: { innerTags: 'keep' }, b: { innerTags: 'keep' } } },
    }),
    'an end without a setting whose device keeps tags': changed(pairDesign(), trunk, keepAtHead, {
      tunnels: { [id]: { b: { innerTags: null } } },
      devices: { 'fw-s1': { settings: { keepInnerTags: true } } },
    }),
  },
  rejected: {
    'a trunk through a tunnel that keeps tags at one end only': {
      design: changed(pairDesign(), trunk, keepAtHead, { segments: { a: { mtu: 1392 } } }),
      findings: [
        {
          sentence: 'Inner tags kept at Head office, discarded at Gullhaven',
          words: 'tag modes differ',
          severity: 'blocking',
          elements: [`tunnels/${id}`],
          properties: [`tunnels/${id}: a.innerTags`, `tunnels/${id}: b.innerTags`],
          fixes: ['Keep tags at Gullhaven'],
        },
      ],
    },
    'an end without a setting, which strips': {
      design: changed(pairDesign(), trunk, keepAtHead, {
        segments: { a: { mtu: 1392 } },
        tunnels: { [id]: { b: { innerTags: null } } },
      }),
      findings: [
        {
          sentence: 'Inner tags kept at Head office, discarded at Gullhaven',
          fixes: ['Keep tags at Gullhaven'],
        },
      ],
    },
  },
});
