import {
  collections,
  type Collection,
  type DeepReadonly,
  type Design,
  type Entry,
} from '../../engine/model/design.ts';
import { isGateway, type DeviceKind, type Port } from '../../engine/model/devices.ts';
import {
  applyPatch,
  diffPatch,
  joinPatches,
  patchAt,
  type MergePatch,
} from '../../engine/model/merge-patch.ts';
import { danglingPatch } from '../../engine/model/references.ts';
import { deviceKindNames } from '../../workspace/operations/name-of.ts';
import type { Operation } from '../../workspace/operations/operation.ts';
import { refused } from '../../workspace/operations/operation.ts';

type Device = Entry<'devices'>;

const keptPorts = (device: Device, kind: DeviceKind): { readonly [id: string]: DeepReadonly<Port> } =>
  Object.fromEntries(
    Object.entries(device.ports).filter(
      ([, port]) =>
        (port.role !== 'wan' || isGateway({ kind })) && (port.role !== 'member-link' || kind === 'ha-pair'),
    ),
  );

const keptSettings = (device: Device, kind: DeviceKind): Device['settings'] => {
  if (isGateway({ kind }) || device.settings === undefined) return device.settings;
  const { spanningTree } = device.settings;
  return kind === 'switch' && spanningTree !== undefined ? { spanningTree } : undefined;
};

/** The device as the other kind: what all kinds have, and what the new one needs. */
const asKind = (device: Device, kind: DeviceKind): Device => {
  const { site, name, profile, managementAddress, notes } = device;
  const settings = keptSettings(device, kind);
  const common = {
    site,
    name,
    ports: keptPorts(device, kind),
    ...(profile === undefined || !isGateway({ kind }) ? {} : { profile }),
    ...(settings === undefined ? {} : { settings }),
    ...(managementAddress === undefined ? {} : { managementAddress }),
    ...(notes === undefined ? {} : { notes }),
  };
  return kind === 'ha-pair'
    ? {
        kind,
        ...common,
        memberNames: { 1: `${name}-1`, 2: `${name}-2` },
        mode: 'active-standby',
        active: 1,
        stateSync: true,
      }
    : { kind, ...common };
};

/** A single device has no second member: what was plugged into it goes, what names the first no longer does. */
const withoutMembers = (design: Design, id: string): readonly MergePatch[] => [
  ...Object.entries(design.links).flatMap(([link, entry]) => {
    if (entry.kind === 'landing')
      return entry.device === id ? [patchAt(['links', link, 'members'], null)] : [];
    const own = (['a', 'b'] as const).filter((end) => entry[end].device === id);
    return own.some((end) => entry[end].member === 2)
      ? [patchAt(['links', link], null)]
      : own.map((end) => patchAt(['links', link, end, 'member'], null));
  }),
  ...Object.entries(design.endpoints)
    .filter(([, endpoint]) => endpoint.device === id)
    .map(([endpoint]) => patchAt(['endpoints', endpoint, 'member'], null)),
];

/** Switches and hosts end no tunnels and hold no forwarders. */
const withoutOverlay = (design: Design, id: string): readonly MergePatch[] => [
  ...Object.entries(design.endpoints)
    .filter(([, endpoint]) => endpoint.device === id)
    .map(([endpoint]) => patchAt(['endpoints', endpoint], null)),
  ...Object.entries(design.associations)
    .filter(([, { a, b }]) => a.device === id || b.device === id)
    .map(([association]) => patchAt(['associations', association], null)),
  ...Object.entries(design.forwarders)
    .filter(([, forwarder]) => forwarder.device === id)
    .map(([forwarder]) => patchAt(['forwarders', forwarder], null)),
];

/** Makes a device one of another kind and removes what only the old kind had, with all that hung on it. */
export const changeDeviceKind = (design: Design, id: string, kind: DeviceKind): Operation => {
  const device = design.devices[id];
  if (device === undefined) return refused('That device is no longer there.');
  const patch = joinPatches(design, [
    patchAt(['devices', id], device.kind === kind ? {} : diffPatch(device, asKind(device, kind))),
    ...(device.kind === 'ha-pair' && kind !== 'ha-pair' ? withoutMembers(design, id) : []),
    ...(isGateway(device) && !isGateway({ kind }) ? withoutOverlay(design, id) : []),
  ]);
  const after = applyPatch(design, patch);
  const label = `Make ${device.name} a ${kind === 'ha-pair' ? 'pair' : deviceKindNames[kind].toLowerCase()}`;
  return { ok: true, label, patch: joinPatches(design, [patch, danglingPatch(after)]) };
};

const words: { readonly [C in Collection]?: readonly [one: string, several: string] } = {
  links: ['cable or landing', 'cables and landings'],
  endpoints: ['loopback endpoint', 'loopback endpoints'],
  associations: ['IPsec association', 'IPsec associations'],
  tunnels: ['tunnel', 'tunnels'],
  forwarders: ['bridge or cross-connect', 'bridges and cross-connects'],
};

/** What a patch takes away, in words: '1 loopback endpoint', '2 tunnels'. */
export const removedBy = (design: Design, patch: MergePatch): readonly string[] => {
  const after = applyPatch(design, patch);
  return collections.flatMap((collection) => {
    const gone = Object.keys(design[collection]).filter((id) => !Object.hasOwn(after[collection], id));
    const word = words[collection];
    return gone.length === 0 || word === undefined
      ? []
      : [`${gone.length} ${gone.length === 1 ? word[0] : word[1]}`];
  });
};
