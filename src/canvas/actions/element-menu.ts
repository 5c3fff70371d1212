import type { MenuAction, MenuGroup } from '../../components/menu.tsx';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { deviceKinds, isGateway } from '../../engine/model/devices.ts';
import { alignments, alignmentWords, directionWords } from '../../workspace/operations/align-parts.ts';
import { canCollapse, isCollapsed } from '../../workspace/operations/collapse-sites.ts';
import { linksIn } from '../../workspace/operations/connect-ports.ts';
import { canLock, isLocked, type Standing } from '../../workspace/operations/move-parts.ts';
import { deviceKindNames, nameOf } from '../../workspace/operations/name-of.ts';
import { isNotable } from '../../workspace/operations/place-parts.ts';
import { keyWords } from '../commands/shortcuts.ts';
import type { ConnectEnd } from '../connect-ends.ts';
import type { JoinRequest } from '../desk-state.ts';
import type { ElementActions, Subject } from './element-actions.ts';
import type { ExtraActions } from './extra-actions.ts';
import { farEnds } from './far-ends.ts';
import { segmentsOf } from './segments-of.ts';

export interface MenuFacts {
  readonly design: Design;
  readonly standing: Standing;
  readonly selection: readonly ElementRef[];
  readonly editable: boolean;
  /** What features of the page add. */
  readonly extra?: ExtraActions | undefined;
}

const sameRef = (a: ElementRef, b: ElementRef): boolean =>
  a.collection === b.collection && a.id === b.id && a.port === b.port && a.member === b.member;

/** What an action is done to: all that is selected if the element is among it, else the element alone. */
export const targetsOf = (ref: ElementRef, selection: readonly ElementRef[]): readonly ElementRef[] =>
  selection.some((selected) => sameRef(selected, ref)) ? selection : [ref];

/** Where the name that is shown is kept; undefined for what has none of its own. */
export const namePathOf = (
  design: Design,
  { ref, member, detach }: Subject,
): readonly string[] | undefined => {
  if (detach !== undefined) return undefined;
  if (member !== undefined) return ['devices', ref.id, 'memberNames', String(member)];
  if (ref.port !== undefined) return ['devices', ref.id, 'ports', ref.port, 'name'];
  if (ref.collection === 'notes')
    return design.notes[ref.id]?.text.includes('\n') === false ? ['notes', ref.id, 'text'] : undefined;
  return [ref.collection, ref.id, 'name'];
};

const copied = ['sites', 'devices', 'notes'] as const;
const canCopy = (ref: ElementRef): boolean =>
  ref.port === undefined && copied.some((collection) => collection === ref.collection);
const canAlign = (ref: ElementRef): boolean => canCopy(ref) || ref.collection === 'transports';

const joining = (design: Design, subject: Subject, act: ElementActions): readonly MenuAction[] => {
  const { ref, member, detach } = subject;
  if (member !== undefined || detach !== undefined) return [];
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

const adding = (design: Design, subject: Subject, act: ElementActions): readonly MenuAction[] => {
  const { ref, detach, member } = subject;
  if (detach !== undefined || member !== undefined || ref.port !== undefined) return [];
  const note: readonly MenuAction[] = isNotable(ref)
    ? [{ label: 'Pin a note here', detail: keyWords('noteHere'), onSelect: () => act.addNote(ref) }]
    : [];
  if (ref.collection === 'sites')
    return [
      ...deviceKinds.map((kind) => ({
        label: `Add ${kind === 'ha-pair' ? 'an' : 'a'} ${kind === 'ha-pair' ? 'HA pair' : deviceKindNames[kind].toLowerCase()} here`,
        onSelect: () => act.addDevice(kind, ref.id),
      })),
      ...note,
    ];
  const device = ref.collection === 'devices' ? design.devices[ref.id] : undefined;
  return device !== undefined && isGateway(device)
    ? [{ label: 'Add an endpoint', onSelect: () => act.addEndpoint(ref.id) }, ...note]
    : note;
};

/** Where what is drawn stands: lock, line up, space out, tidy, collapse. */
const arranging = (
  { design, standing }: MenuFacts,
  targets: readonly ElementRef[],
  act: ElementActions,
): readonly MenuAction[] => {
  const lockable = targets.filter((target) => canLock(design, standing, target));
  const isAllLocked = lockable.length > 0 && lockable.every((target) => isLocked(design, target));
  const aligned = targets.filter(canAlign);
  const sites = targets
    .filter(({ collection, id }) => collection === 'sites' && canCollapse(design, id))
    .map(({ id }) => id);
  const areCollapsed = sites.length > 0 && sites.every((id) => isCollapsed(design, id));
  const devices = targets.filter(({ collection, port }) => collection === 'devices' && port === undefined);
  const isSite = targets.length === 1 && targets[0]?.collection === 'sites';
  return [
    ...(lockable.length > 0
      ? [
          {
            label: isAllLocked ? 'Free its place' : 'Lock its place',
            detail: keyWords('lock'),
            onSelect: () => act.setLocked(lockable, !isAllLocked),
          },
        ]
      : []),
    ...(sites.length > 0
      ? [
          {
            label: areCollapsed ? 'Open the site' : 'Collapse the site',
            detail: keyWords('collapse'),
            onSelect: () => act.setCollapsed(sites, !areCollapsed),
          },
        ]
      : []),
    ...(isSite || devices.length > 1
      ? [
          {
            label: isSite ? 'Tidy this site' : `Tidy these ${devices.length} devices`,
            detail: keyWords('tidySelected'),
            onSelect: () => act.tidy(targets),
          },
        ]
      : []),
    ...(aligned.length > 1
      ? [
          {
            label: 'Align',
            actions: [
              ...alignments.map((alignment) => ({
                label: alignmentWords(alignment),
                detail: keyWords(alignKeys[alignment]),
                onSelect: () => act.align(aligned, alignment),
              })),
              ...(aligned.length > 2
                ? (['across', 'down'] as const).map((direction) => ({
                    label: directionWords(direction),
                    detail: keyWords(direction === 'across' ? 'spaceAcross' : 'spaceDown'),
                    onSelect: () => act.spaceOut(aligned, direction),
                  }))
                : []),
            ],
          },
        ]
      : []),
  ];
};

const alignKeys = {
  left: 'alignLeft',
  centre: 'alignCentre',
  right: 'alignRight',
  top: 'alignTop',
  middle: 'alignMiddle',
  bottom: 'alignBottom',
} as const;

// More ways than fit beside a menu: the outline lists them all.
const mostWays = 16;

/** What shows more of the design and changes nothing. */
const looking = (
  { design, extra }: MenuFacts,
  subject: Subject,
  targets: readonly ElementRef[],
  act: ElementActions,
): readonly MenuAction[] => {
  const { ref } = subject;
  const ways = targets.length === 1 ? farEnds(design, ref) : [];
  const [only] = ways;
  const segments = [...new Set(targets.flatMap((target) => segmentsOf(design, target)))];
  const letters = segments.map((id) => design.segments[id]?.letter ?? id).sort();
  return [
    ...(ways.length === 1 && only !== undefined
      ? [{ label: `Follow ${only.words}`, detail: keyWords('farEnd'), onSelect: () => act.follow(only) }]
      : []),
    ...(ways.length > 1
      ? [
          {
            label: 'Follow',
            actions: ways.slice(0, mostWays).map((far) => ({
              label: far.words,
              onSelect: () => act.follow(far),
            })),
          },
        ]
      : []),
    ...(segments.length > 0
      ? [
          {
            label: `Show only segment${segments.length === 1 ? '' : 's'} ${letters.join(', ')}`,
            detail: keyWords('onlySegment'),
            onSelect: () => act.showOnly(segments),
          },
        ]
      : []),
    ...(targets.length === 1 ? (extra?.(ref) ?? []) : []),
    { label: 'Show on the sheet', onSelect: () => act.show(subject) },
    { label: 'Open in the inspector', detail: 'Enter', onSelect: () => act.inspect(subject) },
  ];
};

/** What can be done with an element, or with all that is selected along with it. */
export const elementMenu = (
  subject: Subject,
  facts: MenuFacts,
  act: ElementActions,
): readonly MenuGroup[] => {
  const { design, selection, editable } = facts;
  const { ref, member, detach } = subject;
  const targets = targetsOf(ref, selection);
  const isAlone = targets.length === 1;
  const views = looking(facts, subject, targets, act);
  const isWhole = detach === undefined && member === undefined;
  const copies = isWhole ? targets.filter(canCopy) : [];
  const copying: readonly MenuAction[] =
    copies.length > 0 ? [{ label: 'Copy', detail: keyWords('copy'), onSelect: () => act.copy(copies) }] : [];
  if (!editable) return [{ actions: [...copying, ...views] }];
  const changing: readonly MenuAction[] = [
    ...(isAlone && namePathOf(design, subject) !== undefined
      ? [{ label: 'Rename', detail: keyWords('rename'), onSelect: () => act.rename(subject) }]
      : []),
    ...copying,
    ...(copies.length > 0
      ? [{ label: 'Duplicate', detail: keyWords('duplicate'), onSelect: () => act.duplicate(copies) }]
      : []),
  ];
  const removal: readonly MenuAction[] =
    member !== undefined
      ? []
      : [
          {
            label: !isAlone
              ? `Remove ${targets.length} elements`
              : (detach?.words ?? `Remove ${nameOf(design, ref)}`),
            detail: keyWords('remove'),
            danger: true,
            onSelect: () => act.remove(subject),
          },
        ];
  return [
    isAlone ? joining(design, subject, act) : [],
    isAlone ? adding(design, subject, act) : [],
    changing,
    isWhole ? arranging(facts, targets, act) : [],
    views,
    removal,
  ]
    .filter((actions) => actions.length > 0)
    .map((actions) => ({ actions }));
};
