import { canLock } from '../../canvas/inspector/panel-head.tsx';
import type { ConnectEnd } from '../../canvas/connect-ends.ts';
import type { JoinRequest } from '../../canvas/desk-state.ts';
import type { MenuAction, MenuGroup } from '../../components/menu.tsx';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { deviceKinds, isGateway, type DeviceKind } from '../../engine/model/devices.ts';
import { linksIn } from '../../workspace/operations/connect-ports.ts';
import { isLocked, type Standing } from '../../workspace/operations/move-parts.ts';
import { deviceKindNames, nameOf } from '../../workspace/operations/name-of.ts';
import type { OutlineGroup, OutlineRow } from './outline-row.ts';

/** What a row's menu, its keys and its buttons can do. */
export interface RowActions {
  readonly rename: (row: OutlineRow) => void;
  readonly inspect: (row: OutlineRow) => void;
  readonly show: (row: OutlineRow) => void;
  readonly remove: (row: OutlineRow) => void;
  readonly duplicate: (refs: readonly ElementRef[]) => void;
  readonly setLocked: (refs: readonly ElementRef[], locked: boolean) => void;
  readonly join: (request: JoinRequest) => void;
  readonly addDevice: (kind: DeviceKind, site: string) => void;
  readonly addEndpoint: (device: string) => void;
  readonly addTo: (group: OutlineGroup) => void;
}

export interface MenuFacts {
  readonly design: Design;
  readonly standing: Standing;
  readonly selection: readonly ElementRef[];
  readonly editable: boolean;
}

/** What the button at a group's head says; absent where nothing is added by one press. */
export const groupAddWords: { readonly [G in OutlineGroup]?: string } = {
  sites: 'Add a site',
  transports: 'Add a transport',
  associations: 'Associate…',
  segments: 'Add a segment',
  notes: 'Add a note',
};

const sameRef = (a: ElementRef, b: ElementRef): boolean =>
  a.collection === b.collection && a.id === b.id && a.port === b.port && a.member === b.member;

/** What an action on a row is done to: all that is selected if the row is among it, else the row's element. */
export const targetsOf = (row: OutlineRow, selection: readonly ElementRef[]): readonly ElementRef[] => {
  const { ref } = row;
  if (ref === undefined) return [];
  return selection.some((selected) => sameRef(selected, ref)) ? selection : [ref];
};

/** Where the name that a row shows is kept; undefined for what has none of its own. */
export const namePathOf = (design: Design, row: OutlineRow): readonly string[] | undefined => {
  const { ref, member, detach } = row;
  if (ref === undefined || detach !== undefined) return undefined;
  if (member !== undefined) return ['devices', ref.id, 'memberNames', String(member)];
  if (ref.port !== undefined) return ['devices', ref.id, 'ports', ref.port, 'name'];
  if (ref.collection === 'notes')
    return design.notes[ref.id]?.text.includes('\n') === false ? ['notes', ref.id, 'text'] : undefined;
  return [ref.collection, ref.id, 'name'];
};

/** Ports, links and demands may go without a name. */
export const mayBeNameless = ({ ref }: OutlineRow): boolean =>
  ref?.port !== undefined || ref?.collection === 'links' || ref?.collection === 'demands';

const copied = ['sites', 'devices', 'notes'] as const;
const canCopy = (ref: ElementRef): boolean =>
  ref.port === undefined && copied.some((collection) => collection === ref.collection);

const joining = (design: Design, row: OutlineRow, act: RowActions): readonly MenuAction[] => {
  const { ref, member } = row;
  if (ref === undefined || member !== undefined || row.detach !== undefined) return [];
  const ask = (label: string, request: JoinRequest): MenuAction => ({
    label,
    onSelect: () => act.join(request),
  });
  if (ref.collection === 'transports')
    return [ask('Land…', { kind: 'landing', b: { kind: 'transport', id: ref.id } })];
  if (ref.collection === 'endpoints')
    return [ask('Tunnel to…', { kind: 'tunnel', a: { kind: 'endpoint', id: ref.id } })];
  const device = ref.collection === 'devices' ? design.devices[ref.id] : undefined;
  if (device === undefined) return [];
  const end: ConnectEnd = { kind: 'device', id: ref.id, port: ref.port, member: ref.member };
  if (ref.port !== undefined) {
    const role = device.ports[ref.port]?.role;
    if (linksIn(design, ref.id, ref.port, ref.member).length > 0) return [];
    // Both members of a pair land together: the landing is asked for without one.
    if (role === 'wan')
      return [ask('Land…', { kind: 'landing', a: { kind: 'device', id: ref.id, port: ref.port } })];
    return role === 'lan' ? [ask('Cable…', { kind: 'cable', a: end })] : [];
  }
  const body: ConnectEnd = { kind: 'device', id: ref.id };
  if (!isGateway(device)) return [ask('Cable…', { kind: 'cable', a: body })];
  const own = Object.entries(design.endpoints).filter(([, endpoint]) => endpoint.device === ref.id);
  const from = own.length === 1 ? ({ a: { kind: 'endpoint', id: own[0]![0] } } as const) : {};
  return [
    ask('Cable…', { kind: 'cable', a: body }),
    ask('Land…', { kind: 'landing', a: body }),
    ...(own.length > 0 ? [ask('Tunnel to…', { kind: 'tunnel', ...from })] : []),
    ask('Associate…', { kind: 'association', a: body }),
  ];
};

const adding = (
  design: Design,
  { ref, detach, member }: OutlineRow,
  act: RowActions,
): readonly MenuAction[] => {
  if (ref === undefined || detach !== undefined || member !== undefined || ref.port !== undefined) return [];
  if (ref.collection === 'sites')
    return deviceKinds.map((kind) => ({
      label: `Add ${kind === 'ha-pair' ? 'an' : 'a'} ${kind === 'ha-pair' ? 'HA pair' : deviceKindNames[kind].toLowerCase()} here`,
      onSelect: () => act.addDevice(kind, ref.id),
    }));
  const device = ref.collection === 'devices' ? design.devices[ref.id] : undefined;
  return device !== undefined && isGateway(device)
    ? [{ label: 'Add an endpoint', onSelect: () => act.addEndpoint(ref.id) }]
    : [];
};

/** What can be done with a row, for who may change the design and for who may only read it. */
export const rowMenu = (row: OutlineRow, facts: MenuFacts, act: RowActions): readonly MenuGroup[] => {
  const { design, standing, selection, editable } = facts;
  const { ref } = row;
  if (ref === undefined) return [];
  const targets = targetsOf(row, selection);
  const isAlone = targets.length === 1;
  const looking: readonly MenuAction[] = [
    { label: 'Show on the sheet', onSelect: () => act.show(row) },
    { label: 'Open in the inspector', detail: 'Enter', onSelect: () => act.inspect(row) },
  ];
  if (!editable) return [{ actions: looking }];
  const copies = targets.filter(canCopy);
  const lockable = targets.filter((target) => canLock(design, standing, target));
  const isAllLocked = lockable.length > 0 && lockable.every((target) => isLocked(design, target));
  const changing: readonly MenuAction[] = [
    ...(isAlone && namePathOf(design, row) !== undefined
      ? [{ label: 'Rename', detail: 'F2', onSelect: () => act.rename(row) }]
      : []),
    ...(copies.length > 0 && row.detach === undefined && row.member === undefined
      ? [{ label: 'Duplicate', detail: 'Ctrl D', onSelect: () => act.duplicate(copies) }]
      : []),
    ...(lockable.length > 0 && row.detach === undefined && row.member === undefined
      ? [
          {
            label: isAllLocked ? 'Free its place' : 'Lock its place',
            onSelect: () => act.setLocked(lockable, !isAllLocked),
          },
        ]
      : []),
  ];
  const removal: readonly MenuAction[] =
    row.member !== undefined
      ? []
      : [
          {
            label: !isAlone
              ? `Remove ${targets.length} elements`
              : (row.detach?.words ?? `Remove ${nameOf(design, ref)}`),
            detail: 'Del',
            danger: true,
            onSelect: () => act.remove(row),
          },
        ];
  return [
    ...(isAlone ? [joining(design, row, act), adding(design, row, act)] : []),
    changing,
    looking,
    removal,
  ]
    .filter((actions) => actions.length > 0)
    .map((actions) => ({ actions }));
};
