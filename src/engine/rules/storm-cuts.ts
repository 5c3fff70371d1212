import { removalPatch } from '../flood/removal-patch.ts';
import type { Storm } from '../flood/storm.ts';
import { suggestCuts } from '../flood/suggest-cuts.ts';
import type { Network } from '../network/network.ts';
import type { Fix } from './finding.ts';
import { portName } from './port-label.ts';
import { counted, listed } from './wording.ts';

/** A cable by its name, or by what it joins. */
export const cableName = (network: Network, id: string): string => {
  const cable = network.design.links[id]!;
  if (cable.kind !== 'cable' || cable.name !== undefined) return cable.name ?? id;
  const [a, b] = [cable.a, cable.b].map(
    ({ device, port }) => `${network.design.devices[device]!.name} ${portName(network.design, device, port)}`,
  );
  return `the cable ${a} – ${b}`;
};

const listedAtMost = 4;

/** The fix that takes out what lies outside the tree of the best connections. */
export const cutFix = (network: Network, storm: Storm): Fix => {
  const cuts = suggestCuts(network, storm);
  const tunnels = cuts.tunnels.map((id) => network.design.tunnels[id]!.name);
  const cables = cuts.cables.map((id) => cableName(network, id));
  const names = [...tunnels, ...cables];
  const counts = [
    ...(tunnels.length > 0 ? [counted(tunnels.length, 'tunnel', 'tunnels')] : []),
    ...(cables.length > 0 ? [counted(cables.length, 'cable', 'cables')] : []),
  ];
  const named = names.length > listedAtMost ? listed(counts) : listed(names);
  return {
    id: 'cut',
    label: `Remove ${names.length === 1 ? named : listed(counts)}`,
    sentence: `Removes ${named}; what is left is a tree of the fastest and widest connections${cuts.isSmallest ? '' : ', in which there is one way between any two'}.`,
    patch: removalPatch(network, cuts),
  };
};
