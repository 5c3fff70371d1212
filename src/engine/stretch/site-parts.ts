import type { DeepReadonly, Entry } from '../model/design.ts';
import type { Port } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import type { Draft } from './draft.ts';
import type { SitePlan } from './stretch-form.ts';

const gigabit = 1_000_000_000;
// Common practice, no source: a few hundred frames a second for each access port, then measured.
const usualStormLimitPps = 500;

type Ports = { [id: string]: DeepReadonly<Port> };

const wanPort = (number: number, index: number, mtu: number): DeepReadonly<Port> => ({
  number,
  name: `wan${index}`,
  role: 'wan',
  speedBps: gigabit,
  mtu,
});
const trunkPort = (
  number: number,
  vlans: readonly number[],
  mtu: number,
  name?: string,
): DeepReadonly<Port> => ({
  number,
  ...(name === undefined ? {} : { name }),
  role: 'lan',
  mode: 'trunk',
  speedBps: gigabit,
  mtu,
  allowedVlans: [...vlans].sort((a, b) => a - b),
});

/** A site's equipment as far as tunnels and segments need to know it. */
export interface SiteParts {
  readonly site: Id;
  readonly code: string;
  readonly gateway: Id;
  /** The switch; absent where the site only passes segments on. */
  readonly access?: Id;
  /** The gateway's ports towards the switch, in the order of the uplinks asked for. */
  readonly uplinks: readonly Id[];
  /** Landings by transport. */
  readonly landings: ReadonlyMap<Id, Id>;
}

export interface SiteNeeds {
  readonly plan: SitePlan;
  readonly code: string;
  /** Ids of the transports by the form's keys. */
  readonly transports: ReadonlyMap<string, Id>;
  /** VLANs of each uplink from the switch to the gateway. */
  readonly uplinks: readonly (readonly number[])[];
  readonly lanMtuBytes: number;
  readonly takesVxlan: 'peers' | 'nobody';
}

/** A landing as a form describes it. */
const landingEntry = (
  device: Id,
  port: Id,
  transport: Id,
  { address, dynamic, nat, pppoe }: SitePlan['landings'][number],
): Entry<'links'> => ({
  kind: 'landing',
  device,
  port,
  transport,
  ...(address === undefined ? {} : address.includes(':') ? { ipv6: address } : { ipv4: address }),
  ...(dynamic === true ? { dynamic } : {}),
  ...(nat === undefined || nat === 'none' ? {} : { nat: { forwarded: nat === 'forwarded' } }),
  ...(pppoe === true ? { accessOverhead: 'pppoe' as const } : {}),
});

/** A site with its gateway and switch, cabled to each other, both members where the gateway is a pair, and landed on its transports. */
export const addSite = (draft: Draft, needs: SiteNeeds): SiteParts => {
  const { plan, code, transports, uplinks, lanMtuBytes } = needs;
  const site = draft.add('sites', code, { name: draft.freeName('sites', plan.name) });
  const name = draft.freeName('devices', `fw-${code}`);
  const transportOf = (key: string): Entry<'transports'> =>
    draft.entries('transports')[transports.get(key)!]!;
  const wanCount = plan.landings.length;
  const ports: Ports = {};
  plan.landings.forEach(({ transport }, i) => {
    const mtu = Math.max(STANDARD_PAYLOAD_BYTES, transportOf(transport).mtu ?? 0);
    ports[`wan${i + 1}`] = wanPort(i + 1, i + 1, mtu);
  });
  uplinks.forEach((vlans, i) => {
    ports[`lan${i + 1}`] = trunkPort(wanCount + i + 1, vlans, lanMtuBytes, `lan${i + 1}`);
  });
  const isPair = plan.gateway === 'ha-pair';
  if (isPair)
    for (const i of [1, 2])
      ports[`sync${i}`] = {
        number: wanCount + uplinks.length + i,
        name: `sync${i}`,
        role: 'member-link',
        speedBps: gigabit,
      };
  const common = { site, name, settings: { vxlanFrom: needs.takesVxlan }, ports };
  const gateway = draft.add(
    'devices',
    name,
    plan.gateway === 'ha-pair'
      ? {
          kind: 'ha-pair',
          ...common,
          memberNames: { 1: `${name}-1`, 2: `${name}-2` },
          mode: 'active-standby',
          active: 1,
          stateSync: true,
        }
      : { kind: plan.gateway, ...common },
  );
  if (isPair)
    for (const port of ['sync1', 'sync2'])
      draft.add('links', `cb-${code}-${port}`, {
        kind: 'cable',
        a: { device: gateway, port, member: 1 },
        b: { device: gateway, port, member: 2 },
      });
  const access = uplinks.length === 0 ? undefined : addSwitch(draft, site, code);
  const parts: SiteParts = {
    site,
    code,
    gateway,
    ...(access === undefined ? {} : { access }),
    uplinks: uplinks.map((_, i) => `lan${i + 1}`),
    landings: new Map(
      plan.landings.map((landing, i) => {
        const transport = transports.get(landing.transport)!;
        const entry = landingEntry(gateway, `wan${i + 1}`, transport, landing);
        return [transport, draft.add('links', `ld-${code}-${transport.slice(0, 24)}`, entry)];
      }),
    ),
  };
  if (access !== undefined)
    for (const port of parts.uplinks) cableToSwitch(draft, { gateway, access, code }, port);
  return parts;
};

const addSwitch = (draft: Draft, site: Id, code: string): Id => {
  const name = draft.freeName('devices', `sw-${code}`);
  return draft.add('devices', name, { kind: 'switch', site, name, ports: {} });
};

const nextNumber = (ports: { readonly [id: string]: { readonly number: number } }): number =>
  Math.max(0, ...Object.values(ports).map(({ number }) => number)) + 1;

const setPort = (draft: Draft, device: Id, port: Id, entry: DeepReadonly<Port>): void => {
  const before = draft.entries('devices')[device]!;
  draft.set('devices', device, { ...before, ports: { ...before.ports, [port]: entry } });
};

/** A new port on a device, its id after its number. */
const addPort = (draft: Draft, device: Id, entryAt: (number: number) => DeepReadonly<Port>): Id => {
  const { ports } = draft.entries('devices')[device]!;
  const number = nextNumber(ports);
  let id = `p${number}`;
  while (Object.hasOwn(ports, id)) id = `${id}-2`;
  setPort(draft, device, id, entryAt(number));
  return id;
};

interface Cabling {
  readonly gateway: Id;
  readonly access: Id;
  readonly code: string;
}

/** Cables from a gateway's port to the switch: one from each member of a pair, each into a trunk port like it. */
const cableToSwitch = (draft: Draft, { gateway, access, code }: Cabling, port: Id): void => {
  const device = draft.entries('devices')[gateway]!;
  const { allowedVlans, mtu } = device.ports[port]!;
  const vlans = Array.isArray(allowedVlans) ? (allowedVlans as readonly number[]) : [];
  for (const member of device.kind === 'ha-pair' ? ([1, 2] as const) : [undefined]) {
    const plug = addPort(draft, access, (number) => trunkPort(number, vlans, mtu ?? STANDARD_PAYLOAD_BYTES));
    draft.add('links', `cb-${code}-${port}${member === undefined ? '' : `-${member}`}`, {
      kind: 'cable',
      a: { device: access, port: plug },
      b: { device: gateway, port, ...(member === undefined ? {} : { member }) },
    });
  }
};

/** A further trunk from a gateway to its switch, for a segment that may not share the first; answers the gateway's port. */
export const addUplink = (draft: Draft, parts: Cabling, vlans: readonly number[], mtuBytes: number): Id => {
  const port = addPort(draft, parts.gateway, (number) => trunkPort(number, vlans, mtuBytes, `lan${number}`));
  cableToSwitch(draft, parts, port);
  return port;
};

/** Adds a VLAN to what a trunk allows; one that allows all, or has no list, stays as it is. */
export const allowVlan = (draft: Draft, device: Id, port: Id, vlan: number): void => {
  const entry = draft.entries('devices')[device]!.ports[port]!;
  const { allowedVlans } = entry;
  if (!Array.isArray(allowedVlans)) return;
  const list = allowedVlans as readonly number[];
  if (list.includes(vlan)) return;
  setPort(draft, device, port, { ...entry, allowedVlans: [...list, vlan].sort((a, b) => a - b) });
};

/** An access port of a switch in a VLAN. */
export const addAccessPort = (draft: Draft, access: Id, vlan: number, mtuBytes: number): Id =>
  addPort(draft, access, (number) => ({
    number,
    role: 'lan',
    mode: 'access',
    vlan,
    speedBps: gigabit,
    mtu: mtuBytes,
    stormLimitPps: usualStormLimitPps,
  }));

export interface HostNeeds {
  readonly site: Id;
  readonly segment: Id;
  readonly name: string;
  readonly face?: Extract<Entry<'devices'>, { kind: 'host' }>['face'];
  readonly address?: string;
  /** Largest packet that it may send; absent where nobody knows yet. */
  readonly mtuBytes?: number;
}

/** A host in an access port. */
export const addHost = (draft: Draft, access: Id, port: Id, needs: HostNeeds): Id => {
  const { site, segment, face, address, mtuBytes } = needs;
  const name = draft.freeName('devices', needs.name);
  const host = draft.add('devices', name, {
    kind: 'host',
    site,
    name,
    segment,
    ...(face === undefined ? {} : { face }),
    ...(address === undefined ? {} : { addresses: [address] }),
    ports: {
      p1: {
        number: 1,
        role: 'lan',
        mode: 'access',
        speedBps: gigabit,
        ...(mtuBytes === undefined ? {} : { mtu: mtuBytes }),
      },
    },
  });
  draft.add('links', `cb-${name}`, {
    kind: 'cable',
    a: { device: host, port: 'p1' },
    b: { device: access, port },
  });
  return host;
};
