import fc from 'fast-check';
import { expect, test } from 'vitest';
import { changesToDecorations } from '#drawing/changes-to-decorations.ts';
import { pictureSvgText } from '#drawing/picture/picture-svg.ts';
import { sheetPicture } from '#drawing/picture/sheet-picture.ts';
import { route } from '#drawing/routing/route.ts';
import { compareDesigns } from '#engine/diff/compare-designs.ts';
import { together } from '#engine/diff/together.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { hubDesign, pairDesign } from '../support/designs.ts';
import { generatedDesign } from '../support/generated-designs.ts';
import { generatedEdit } from '../support/generated-edits.ts';

const pair = pairDesign();
const tunnel = Object.keys(pair.tunnels)[0]!;
const marksOf = (before: Design, after: Design) => {
  const both = together(before, after);
  const { tones, tags = [] } = changesToDecorations(both, compareDesigns(before, after).changes);
  return {
    tones,
    signs: Object.fromEntries(tags.map(({ at, text }) => [`${at.collection}/${at.id}`, text])),
  };
};
const changed = (patch: MergePatch) => marksOf(pair, applyPatch(pair, patch));

test('each kind of change has a sign and a tone of its own', () => {
  const after = applyPatch(pair, {
    tunnels: { [tunnel]: null },
    forwarders: Object.fromEntries(
      Object.entries(pair.forwarders).map(([id, { circuits }]) => [
        id,
        {
          circuits: Object.fromEntries(
            Object.entries(circuits)
              .filter(([, circuit]) => circuit.kind === 'tunnel')
              .map(([circuit]) => [circuit, null]),
          ),
        },
      ]),
    ),
    devices: { x: { kind: 'switch', name: 'sw-quay', site: 's1', ports: {} } },
    transports: { coast: { mtu: 1400 } },
  });
  const { tones, signs } = marksOf(pair, after);
  expect(signs).toMatchObject({ [`tunnels/${tunnel}`]: '−', 'devices/x': '+', 'transports/coast': 'Δ' });
  expect(tones).toMatchObject({
    [`tunnels/${tunnel}`]: ['removed'],
    'devices/x': ['added'],
    'transports/coast': ['changed'],
  });
});

test('a part shows where it is: a circuit and a port at their device, as a change', () => {
  const [forwarder, { device }] = Object.entries(pair.forwarders)[0]!;
  expect(changed({ forwarders: { [forwarder]: { multicast: 'snoop' } } }).signs).toEqual({
    [`devices/${device}`]: 'Δ',
  });
  expect(changed({ devices: { [device]: { ports: { q: { number: 99, role: 'lan' } } } } }).signs).toEqual({
    [`devices/${device}`]: 'Δ',
  });
});

test('what only moved on the sheet, and what has no place on it, wears no mark', () => {
  expect(changed({ layout: { devices: { [Object.keys(pair.devices)[0]!]: { x: 1, y: 2 } } } }).signs).toEqual(
    {},
  );
  expect(changed({ segments: { a: { mtu: 1300 } }, meta: { title: 'Other' } }).signs).toEqual({});
});

test('what was removed stands where it stood, in dashes and hatched, and can be told without colour', () => {
  const before = hubDesign(2);
  const gone = Object.keys(before.devices).find((id) => before.devices[id]!.kind === 'host')!;
  const cables = Object.entries(before.links).filter(
    ([, link]) => link.kind === 'cable' && (link.a.device === gone || link.b.device === gone),
  );
  const after = applyPatch(before, {
    devices: { [gone]: null },
    links: Object.fromEntries(cables.map(([id]) => [id, null])),
  });
  const both = together(before, after);
  const decorations = changesToDecorations(both, compareDesigns(before, after).changes);
  const drawn = pictureSvgText(
    sheetPicture(both, { look: 'print', tunnelSegments: tunnelSegments(indexNetwork(both)), decorations }),
  );
  expect(both.devices[gone]).toEqual(before.devices[gone]);
  expect(drawn).toContain('stroke-dasharray="7 5"');
  expect(drawn).toContain('>−<');
});

test('any two designs can be drawn as one', () => {
  fc.assert(
    fc.property(
      generatedDesign,
      fc.array(generatedEdit, { minLength: 1, maxLength: 5 }),
      generatedDesign,
      fc.boolean(),
      (before, edits, other, isFar) => {
        const after = isFar ? other : edits.reduce((design, edit) => edit(design), before);
        const both = together(before, after);
        const { tags = [] } = changesToDecorations(both, compareDesigns(before, after).changes);
        for (const { at } of tags) expect(both[at.collection][at.id]).toBeDefined();
        expect(() => route(both)).not.toThrow();
      },
    ),
    { numRuns: 25 },
  );
});
