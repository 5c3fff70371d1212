import { isolationMissingLeg } from '#engine/rules/isolation-missing-leg.ts';
import type { Design } from '#engine/model/design.ts';
import { hubDesign, meshDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const mesh = (count: number, join = {}) => meshDesign(count, { join: { isolation: 'mesh', ...join } });
const withoutLeg = (design: Design, a: string, b: string, keepAssociation = false) => {
  const tunnel = `tn-${a}-${b}-a`;
  const association = `as-${a}-${b}`;
  const gone = { circuits: { [tunnel]: null } };
  return changed(design, {
    tunnels: { [tunnel]: null },
    ...(keepAssociation || design.associations[association] === undefined
      ? {}
      : { associations: { [association]: null } }),
    forwarders: { [`br-${a}-a`]: gone, [`br-${b}-a`]: gone },
  });
};

testRule(isolationMissingLeg, {
  accepted: {
    'a whole mesh': mesh(4),
    'a hub that relays': hubDesign(4),
    'a mesh without isolation and a leg': withoutLeg(meshDesign(3), 's1', 's2'),
    'an access port that is isolated, which is another rule’s': changed(hubDesign(2), {
      forwarders: {
        'br-s0-a': { circuits: { access: { isolation: 'x' }, 'tn-s0-s1-a': { isolation: 'x' } } },
      },
    }),
  },
  rejected: {
    'a mesh of four without one tunnel, whose association is gone, too': {
      design: withoutLeg(mesh(4), 's1', 's3'),
      findings: [
        {
          sentence: 'Gullhaven and Skerry have no tunnel for segment A',
          words: 'tunnel missing',
          severity: 'blocking',
          elements: ['devices/fw-s1', 'devices/fw-s3', 'devices/fw-s0'],
          fixes: ['Join Gullhaven and Skerry'],
        },
      ],
    },
    'one whose association is still there': {
      design: withoutLeg(mesh(4), 's1', 's3', true),
      findings: [
        {
          sentence: 'Gullhaven and Skerry have no tunnel for segment A',
          fixes: ['Join Gullhaven and Skerry'],
        },
      ],
    },
    'two legs missing, each once': {
      design: withoutLeg(withoutLeg(mesh(5), 's1', 's3'), 's2', 's4'),
      findings: [
        {
          sentence: 'Gullhaven and Skerry have no tunnel for segment A',
          fixes: ['Join Gullhaven and Skerry'],
        },
        {
          sentence: 'Orrin Point and Marl have no tunnel for segment A',
          fixes: ['Join Orrin Point and Marl'],
        },
      ],
    },
    'a hub that keeps its spokes apart': {
      design: hubDesign(3, { hub: 'ha-pair', join: { isolation: 'spokes' } }),
      findings: [
        {
          sentence: 'Head office keeps its tunnels of segment A apart',
          words: 'hub isolates',
          elements: [
            'devices/fw-s0',
            'forwarders/br-s0-a',
            'tunnels/tn-s0-s1-a',
            'tunnels/tn-s0-s2-a',
            'tunnels/tn-s0-s3-a',
          ],
          fixes: ['Let fw-s0 relay'],
        },
      ],
    },
    'one with two spokes, which could have a tunnel of their own': {
      design: hubDesign(2, { join: { isolation: 'spokes' } }),
      findings: [
        {
          sentence: 'Head office keeps its tunnels of segment A apart',
          fixes: ['Let fw-s0 relay', 'Join Gullhaven and Orrin Point'],
        },
      ],
    },
  },
});
