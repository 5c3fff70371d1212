import type { Decorations, Tone } from '../../drawing/decorations.ts';
import { elementKey } from '../../drawing/decorations.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { OutageFacts } from './outage-facts.ts';

const mostTags = 24;

const withoutMarks: Partial<Decorations> = { loops: [], ghosts: [], overhangs: [], balloons: [] };

/** Everything that is out of service, as the sheet's elements. */
const casualtyRefs = ({ casualties, outage }: OutageFacts): readonly ElementRef[] => {
  const { devices, members, cables, landings, tunnels, associations } = casualties;
  const all = (collection: ElementRef['collection'], ids: Iterable<string>): readonly ElementRef[] =>
    [...ids].map((id) => ({ collection, id }));
  return [
    ...all('devices', devices),
    ...[...members].map(([id, member]) => ({ collection: 'devices' as const, id, member })),
    ...all('links', [...cables, ...landings]),
    ...all('associations', associations),
    ...all('tunnels', new Set([...tunnels, ...outage.tunnelsDown.map(({ tunnel }) => tunnel)])),
  ];
};

/** How many others each point's device has lost, and whether that is all of them. */
const lossesByDevice = ({ outage }: OutageFacts) => {
  const lost = new Map<string, number>();
  const cutOff = new Set<string>();
  for (const { pairs = [], cutOff: none } of outage.segments) {
    for (const { a, b } of pairs)
      for (const { device } of [a, b]) lost.set(device, (lost.get(device) ?? 0) + 1);
    for (const { device } of none) cutOff.add(device);
  }
  return { lost, cutOff };
};

/**
 * How an outage shows on the sheet: what failed and what went with it as failed, hosts that lost somebody lit and tagged with
 * how many, the others dimmed. Findings' marks stand aside.
 */
export const outageDecorations = (
  design: Design,
  failed: readonly ElementRef[],
  facts: OutageFacts | undefined,
): Partial<Decorations> => {
  if (facts === undefined || failed.length === 0) return withoutMarks;
  const tones: Record<string, readonly Tone[]> = {};
  for (const ref of [...failed, ...casualtyRefs(facts)]) tones[elementKey(ref)] = ['failed'];
  const { lost, cutOff } = lossesByDevice(facts);
  for (const [id, { kind }] of Object.entries(design.devices)) {
    const key = elementKey({ collection: 'devices', id });
    if (lost.has(id)) tones[key] = [...(tones[key] ?? []), 'lit'];
    else if (kind === 'host' && lost.size > 0) tones[key] = [...(tones[key] ?? []), 'dimmed'];
  }
  const tags = [...lost]
    .sort(([x, n], [y, m]) => m - n || (x < y ? -1 : 1))
    .slice(0, mostTags)
    .map(([id, count]) => ({
      at: { collection: 'devices' as const, id },
      text: cutOff.has(id) ? 'cut off' : `lost ${count}`,
      strong: cutOff.has(id),
    }));
  return { ...withoutMarks, tones, tags };
};
