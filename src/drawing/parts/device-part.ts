import { elementKey } from '../decorations.ts';
import type { DeviceGeometry, PipGeometry, PlateGeometry, Rect } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { paint } from '../theme/paint.ts';
import type { DeviceFacts, DrawingFacts } from './drawing-facts.ts';
import { faceplate } from './faceplate.ts';
import { pairBracket, pairTitle } from './ha-pair.ts';
import { changeFrame, changeToneOf } from './change-marks.ts';
import { cornerTicks, selectionWash } from './highlight.ts';
import type { Look } from './look.ts';
import { dimmedOpacity, hasTone, tonesOf } from './look.ts';
import { plateOutline } from './outlines.ts';
import { pipMark } from './pips.ts';
import { pip as pipSize, strip } from './sizes.ts';
import { textLine } from './text-shape.ts';

const pipNumber = (pip: PipGeometry, number: number, plate: Rect): Shape | undefined => {
  const inset = pipSize.numberInset;
  const style = { sizePx: 11.2, weight: 500 as const, key: 'number' };
  // Strips are dark and hold the name: numbers stand in the body only.
  const sideways = pip.side === 'left' || pip.side === 'right';
  if (pip.side === 'top' || (sideways && pip.at.y - 5 < plate.y + strip.height)) return undefined;
  if (pip.side === 'bottom')
    return textLine(String(number), pip.at.x, pip.at.y - inset, { ...style, anchor: 'middle' });
  return pip.side === 'left'
    ? textLine(String(number), pip.at.x + inset, pip.at.y + 4, style)
    : textLine(String(number), pip.at.x - inset, pip.at.y + 4, { ...style, anchor: 'end' });
};

const pips = (device: DeviceGeometry, facts: DeviceFacts, look: Look, failed: boolean): readonly Shape[] =>
  look.level === 'far'
    ? []
    : device.pips.map((pip) => {
        const ref = {
          collection: 'devices' as const,
          id: device.id,
          port: pip.port,
          ...(pip.member === undefined ? {} : { member: pip.member }),
        };
        const tones = tonesOf(look, ref);
        const port = facts.ports[pip.port];
        const plate = device.plates.find((p) => p.member === pip.member) ?? device.plates[0];
        const numbered =
          look.level === 'near' && device.kind !== 'host' && pip.shape !== 'bar' && pip.shape !== 'lozenge';
        return group(
          [
            pipMark(
              pip.shape,
              pip.at,
              {
                cabled: pip.cabled,
                shut: failed || port?.shut === true,
                fault: tones.includes('fault'),
                hovered: tones.includes('hovered') || tones.includes('selected'),
              },
              pip.side === 'left' || pip.side === 'right',
            ),
            numbered && port !== undefined && plate !== undefined && pipNumber(pip, port.number, plate.rect),
          ],
          { key: elementKey(ref), data: { ref, part: 'pip' } },
        );
      });

/** The lamp's halo follows the silhouette; a hovered plate wears the same in soft blue. */
const outlineHalo = (device: DeviceGeometry, plate: PlateGeometry, lit: boolean): readonly Shape[] => {
  const d = plateOutline(device.kind, plate.rect);
  const key = plate.member ?? 0;
  return [
    {
      ...shape('path', {
        d,
        fill: 'none',
        stroke: paint(lit ? 'lamp-line' : 'blue'),
        strokeWidth: lit ? 16.6 : 8.4,
        strokeLinejoin: 'round',
      }),
      key: `halo-edge-${key}`,
    },
    {
      ...shape('path', {
        d,
        fill: 'none',
        stroke: paint(lit ? 'lamp' : 'blue-soft'),
        strokeWidth: lit ? 14 : 6,
        strokeLinejoin: 'round',
      }),
      key: `halo-${key}`,
    },
  ];
};

/** A device with all it shows: plates, a pair's bracket and title, ports, and how it stands out. */
export const devicePart = (device: DeviceGeometry, facts: DrawingFacts, look: Look): Shape => {
  const ref = { collection: 'devices', id: device.id } as const;
  const own = facts.devices[device.id];
  const key = elementKey(ref);
  if (own === undefined) return group([], { key });
  const tones = tonesOf(look, ref);
  const dimmed = tones.includes('dimmed');
  const selected = tones.includes('selected');
  const memberTone = (plate: PlateGeometry, tone: 'failed' | 'fault' | 'lit'): boolean =>
    tones.includes(tone) ||
    (plate.member !== undefined && hasTone(look, { ...ref, member: plate.member }, tone));
  const plates = device.plates.map((plate) => {
    const member = own.members?.find((m) => m.member === plate.member);
    return group(
      faceplate(
        member === undefined
          ? own
          : { kind: own.kind, name: member.name, glyph: own.glyph, second: member.word },
        plate.rect,
        {
          level: look.level,
          standby: member?.word === 'standby',
          mirrored: device.mirrored,
          failed: memberTone(plate, 'failed'),
          fault: memberTone(plate, 'fault'),
          dimmed,
        },
      ),
      {
        key: `plate-${plate.member ?? 0}`,
        data: { ref: plate.member === undefined ? ref : { ...ref, member: plate.member }, part: 'plate' },
      },
    );
  });
  const failed = device.plates.length > 0 && device.plates.every((plate) => memberTone(plate, 'failed'));
  const change = changeToneOf(tones);
  const lit = device.plates.filter((plate) => memberTone(plate, 'lit'));
  return group(
    [
      selected && selectionWash(device.rect),
      ...(tones.includes('hovered') && !selected
        ? device.plates.flatMap((plate) => outlineHalo(device, plate, false))
        : []),
      ...lit.flatMap((plate) => outlineHalo(device, plate, true)),
      pairBracket(device),
      ...plates,
      device.plates.length > 1 && pairTitle(device, own.name, look.level, dimmed),
      ...pips(device, own, look, failed),
      change !== undefined && changeFrame(device.rect, change),
      selected && cornerTicks(device.rect),
    ],
    { key, data: { ref }, ...(dimmed ? { attrs: { opacity: dimmedOpacity } } : {}) },
  );
};
