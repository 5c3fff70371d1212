import type { Storm } from '../flood/storm.ts';
import { isGateway } from '../model/devices.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import type { Network } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { doublyActive, standbyFix } from './standby-fix.ts';
import { cutFix } from './storm-cuts.ts';
import { stormBody, stormOfFault, stormsOf } from './storm-faults.ts';
import { ofSegments, sitesOf, stormSeen, stormWhy } from './storm-words.ts';
import { sentenceStart } from './sentence-start.ts';
import { counted, listed } from './wording.ts';

/** Spanning tree at every switch of a ring of switches; at gateways it would only see what crosses untagged. */
const treeFix = ({ design }: Network, storm: Storm): readonly Fix[] => {
  const switches = storm.devices.filter((id) => design.devices[id]!.kind === 'switch');
  const off = switches.filter((id) => design.devices[id]!.settings?.spanningTree?.mode !== 'on');
  if (switches.length < storm.devices.length || off.length === 0) return [];
  const names = listed(off.map((id) => design.devices[id]!.name));
  const patch: MergePatch = {
    devices: Object.fromEntries(off.map((id) => [id, { settings: { spanningTree: { mode: 'on' } } }])),
  };
  return [
    {
      id: 'spanning-tree',
      label: 'Turn on spanning tree',
      sentence: `Turns on spanning tree at ${names}; it blocks the spare connection until it is needed.`,
      patch,
    },
  ];
};

/** A site of which two gateways, or both members of a pair, are in the ring. */
const siteOfTwo = (network: Network, storm: Storm): string | undefined => {
  const { design } = network;
  const sites = storm.devices
    .filter((id) => isGateway(design.devices[id]!))
    .concat(doublyActive(network, storm.devices))
    .map((id) => design.devices[id]!.site);
  return sites.find((site, i) => sites.indexOf(site) < i);
};

export const stormLocal = defineRule({
  id: 'storm-local',
  title: 'Cables of a site form no loop that nothing blocks',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: stormWhy,
  seen: stormSeen,
  sources: [{ document: 'RFC 4664', clause: 'section 3.4.1' }, 'common practice, no source'],
  messages: {
    within: {
      words: 'broadcast storm',
      sentence: (v: {
        readonly cables: string;
        readonly verb: string;
        readonly site: string;
        readonly segments: string;
      }) => `${v.cables} at ${v.site} ${v.verb} a loop${v.segments}`,
    },
    through: {
      words: 'broadcast storm',
      sentence: (v: { readonly sites: string; readonly segments: string }) =>
        `A loop${v.segments} runs through ${v.sites}`,
    },
    twoWays: {
      words: 'broadcast storm',
      sentence: (v: { readonly site: string; readonly segments: string }) =>
        `Two gateways at ${v.site} both bridge frames${v.segments}`,
      why: `Two gateways on one switch, both with a tunnel for the segment, are two ways between the same places, and no spanning tree sees both. ${stormWhy}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return stormsOf(network, 'local').map((storm) => {
      const words = { segments: ofSegments(design, storm) };
      const body = stormBody(storm);
      if (storm.tunnels.length > 0) {
        const site = siteOfTwo(network, storm);
        const about = {
          ...body,
          sources: [
            { document: 'RFC 8365', clause: 'section 8.1.3' },
            { document: 'RFC 4664', clause: 'section 3.4.1' },
          ],
        };
        return site === undefined
          ? { message: 'through' as const, values: { sites: sitesOf(design, storm), ...words }, ...about }
          : { message: 'twoWays' as const, values: { site: design.sites[site]!.name, ...words }, ...about };
      }
      return {
        message: 'within' as const,
        values: {
          cables: sentenceStart(
            storm.cables.length === 1 ? 'a cable' : counted(storm.cables.length, 'cable', 'cables'),
          ),
          verb: storm.cables.length === 1 ? 'forms' : 'form',
          site: sitesOf(design, storm),
          ...words,
        },
        ...body,
        properties: storm.devices
          .filter((id) => design.devices[id]!.kind === 'switch')
          .map((id) => ({
            ref: { collection: 'devices' as const, id },
            path: ['settings', 'spanningTree', 'mode'],
          })),
      };
    });
  },
  fixes: (fault, network) => {
    const storm = stormOfFault(network, 'local', fault);
    return [...treeFix(network, storm), ...standbyFix(network, storm.devices), cutFix(network, storm)];
  },
});
