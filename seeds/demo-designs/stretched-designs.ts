import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { StretchForm } from '#engine/stretch/stretch-form.ts';
import { stretch } from '#engine/stretch/stretch.ts';

/** Larger designs, made as the Stretch assistant makes them. Everything is invented. */

const firstWords = [
  'Marl',
  'Tarn',
  'Velt',
  'Wick',
  'Dunn',
  'Pell',
  'Ashby',
  'Crane',
  'Holt',
  'Inver',
  'Lode',
  'Sall',
];
const lastWords = ['Quay', 'Holm', 'Ness', 'Rock', 'Stair'];

/** Sixty names of landing stages. */
const stageNames = lastWords.flatMap((last) => firstWords.map((first) => `${first} ${last}`));

const coast: StretchForm['transports'][number] = {
  key: 'coast',
  name: 'Coastal access',
  kind: 'internet',
  trusted: false,
  mtu: 1500,
  latencyUs: 18_000,
};

const onCoast = (address?: string): StretchForm['sites'][number]['landings'] => [
  { transport: 'coast', ...(address === undefined ? { dynamic: true } : { address }) },
];

const madeFrom = (form: StretchForm, meta: Design['meta']): Design => {
  const design: Design = {
    ...emptyDesign(meta.title),
    meta: {
      supplementaryTitle: 'Saltmarsh Ferries',
      legalOwner: 'Ternwick Net',
      documentType: 'L2 overlay design',
      revision: 'A',
      createdBy: 'R. Halloran',
      status: 'Draft',
      language: 'en',
      example: true,
      ...meta,
    },
  };
  const answer = stretch(form, { design, newId: (stem) => stem });
  if (!answer.ok)
    throw new Error(
      answer.problems.map(({ field, expected }) => `${field}: expected ${expected}`).join('\n'),
    );
  return applyPatch(design, answer.patch);
};

/** Ticketing and cameras of sixty landing stages at one head office. Stages have whatever address their provider gives. */
export function landingStages(): Design {
  return madeFrom(
    {
      sites: [
        { key: 'ho', name: 'Head office', gateway: 'ha-pair', landings: onCoast('192.0.2.10') },
        ...stageNames.map((name, i) => ({
          key: `s${i + 1}`,
          name,
          gateway: 'firewall' as const,
          landings: onCoast(),
        })),
      ],
      transports: [coast],
      segments: [
        {
          key: 'ticketing',
          name: 'Ticketing',
          vlan: 110,
          subnet: '10.110.0.0/22',
          protocols: ['ipv4'],
          face: 'kiosk',
        },
        {
          key: 'cctv',
          name: 'CCTV',
          vlan: 130,
          subnet: '10.130.0.0/23',
          protocols: ['ipv4'],
          face: 'camera',
          sites: ['ho', ...stageNames.flatMap((_, i) => (i % 3 === 0 ? [] : [`s${i + 1}`]))],
        },
      ],
      topology: { kind: 'hub', hub: 'ho' },
      pools: { loopbacks: '10.254.0.0/16', vnis: { from: 20_001, to: 20_999 } },
      encrypted: true,
      domain: 'saltmarsh.example',
      sampleHosts: true,
      standingNotes: true,
    },
    { title: 'Sixty landing stages, one hub', identification: 'SMF-L2-007' },
  );
}

const terminals = ['Fenwater', 'Cold Ness', 'Brack', 'Selsand', 'Marl', 'Tarn', 'Velt', 'Wick'];

/** Berth control of eight terminals, each joined to each; three of them share a second segment. */
export function meshedTerminals(): Design {
  return madeFrom(
    {
      sites: terminals.map((name, i) => ({
        key: `t${i + 1}`,
        name,
        gateway: 'firewall' as const,
        landings: onCoast(`198.51.100.${21 + i}`),
      })),
      transports: [coast],
      segments: [
        {
          key: 'berth',
          name: 'Berth control',
          vlan: 120,
          subnet: '10.120.0.0/24',
          protocols: ['ipv4', 'multicast'],
          face: 'controller',
        },
        {
          key: 'ticketing',
          name: 'Ticketing',
          vlan: 110,
          subnet: '10.110.0.0/22',
          protocols: ['ipv4'],
          face: 'kiosk',
          sites: ['t1', 't2', 't3'],
        },
      ],
      topology: { kind: 'mesh' },
      pools: { loopbacks: '10.253.0.0/16', vnis: { from: 30_001, to: 30_999 } },
      encrypted: true,
      domain: 'saltmarsh.example',
      sampleHosts: true,
      standingNotes: true,
    },
    { title: 'Eight terminals, meshed', identification: 'SMF-L2-008' },
  );
}
