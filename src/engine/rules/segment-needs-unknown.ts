import { inLetterOrder } from '../flood/segment-nodes.ts';
import { tunnelSegments } from '../flood/tunnel-segments.ts';
import { entryOf } from '../network/network.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import { needOf } from './segment-capacity.ts';
import { namedOrCounted } from './wording.ts';

export const segmentNeedsUnknown = defineRule({
  id: 'segment-needs-unknown',
  title: 'What each stretched segment must carry is stated',
  severity: 'advisory',
  looksAt: segmentPathFacts,
  why: 'Which protocols must survive and how long packets get decides on filters, multicast and packet sizes. Ask whoever runs the hosts; until then the checks of these keep silent.',
  seen: 'Whatever nobody asked about is found out on the first day of operation.',
  sources: ['common practice, no source'],
  messages: {
    unstated: {
      words: 'needs not stated',
      sentence: (v: { readonly segments: string }) => `What ${v.segments} must carry is not stated`,
    },
  },
  check: (network) => {
    const { design } = network;
    const stretched = new Set([...tunnelSegments(network).values()].flat());
    const gaps = inLetterOrder(network)
      .filter((id) => stretched.has(id))
      .map((id) => ({
        ref: { collection: 'segments' as const, id },
        fields: [
          ...((entryOf(design.segments, id).protocols ?? []).length === 0 ? ['protocols'] : []),
          ...(needOf(network, id) === undefined ? ['mtu'] : []),
        ],
      }))
      .filter(({ fields }) => fields.length > 0);
    if (gaps.length === 0) return [];
    return [
      {
        message: 'unstated',
        values: {
          segments: namedOrCounted(
            gaps.map(({ ref }) => entryOf(design.segments, ref.id).name),
            'segments',
          ),
        },
        elements: gaps.map(({ ref }) => ref),
        // One for the whole design, however many segments there are.
        identity: ['design'],
        properties: gaps.flatMap(({ ref, fields }) => fields.map((field) => ({ ref, path: [field] }))),
        basis: gaps.map(({ ref, fields }) => [ref.id, ...fields]),
      },
    ];
  },
});
