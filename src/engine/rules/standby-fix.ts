import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import type { Fix } from './finding.ts';
import { listed } from './wording.ts';

/** Those of the devices that are pairs of which both members bridge, in their order. */
export const doublyActive = ({ design }: Network, devices: readonly Id[]): readonly Id[] =>
  [...new Set(devices)].filter((id) => {
    const device = entryOf(design.devices, id);
    return device.kind === 'ha-pair' && device.mode === 'active-active';
  });

/** Lets one member alone of every such pair forward; nothing where there is none. */
export const standbyFix = (network: Network, devices: readonly Id[]): readonly Fix[] => {
  const pairs = doublyActive(network, devices);
  if (pairs.length === 0) return [];
  const names = listed(pairs.map((id) => entryOf(network.design.devices, id).name));
  return [
    {
      id: 'standby',
      label: 'Let one member stand by',
      sentence: `Sets ${names} to active and standby, so that one member alone forwards frames.`,
      patch: { devices: Object.fromEntries(pairs.map((id) => [id, { mode: 'active-standby' }])) },
    },
  ];
};
