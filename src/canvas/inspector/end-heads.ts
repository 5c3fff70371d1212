import type { Entry } from '../../engine/model/design.ts';
import { placesOf } from '../../engine/rules/places.ts';
import type { DesignFacts } from '../../engine/network/network.ts';
import type { EndHead } from './mirror.tsx';

const deviceWords = (design: DesignFacts, id: string, place: string): string => {
  const device: Entry<'devices'> = design.devices[id]!;
  const kind = device.kind === 'ha-pair' ? 'pair' : device.kind;
  return device.name === place ? kind : device.kind === 'ha-pair' ? `${device.name}, pair` : device.name;
};

/** What stands over the two columns of a mirror between two devices. */
export const endHeads = (
  design: DesignFacts,
  deviceA: string,
  deviceB: string,
): { readonly a: EndHead; readonly b: EndHead } => {
  const places = placesOf(design, deviceA, deviceB);
  return {
    a: { place: places.a, device: deviceWords(design, deviceA, places.a) },
    b: { place: places.b, device: deviceWords(design, deviceB, places.b) },
  };
};
