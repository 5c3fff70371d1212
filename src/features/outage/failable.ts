import { refOfKey } from '../../canvas/ref-at.ts';
import { elementKey } from '../../drawing/decorations.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';

const failing: readonly ElementRef['collection'][] = [
  'sites',
  'devices',
  'links',
  'tunnels',
  'associations',
  'transports',
];

const exists = (design: Design, { collection, id, port, member }: ElementRef): boolean => {
  if (!failing.includes(collection) || !Object.hasOwn(design[collection], id)) return false;
  const device = collection === 'devices' ? design.devices[id] : undefined;
  return (
    (port === undefined || (device !== undefined && Object.hasOwn(device.ports, port))) &&
    (member === undefined || device?.kind === 'ha-pair')
  );
};

/** What fails when something on the sheet is pressed: a ring's or a forwarder's device; undefined for what can't fail. */
export const failableAt = (design: Design, ref: ElementRef): ElementRef | undefined => {
  if (ref.collection === 'endpoints') {
    const endpoint = design.endpoints[ref.id];
    return endpoint === undefined
      ? undefined
      : {
          collection: 'devices',
          id: endpoint.device,
          ...(endpoint.member === undefined ? {} : { member: endpoint.member }),
        };
  }
  if (ref.collection === 'forwarders') {
    const device = design.forwarders[ref.id]?.device;
    return device === undefined ? undefined : { collection: 'devices', id: device };
  }
  return exists(design, ref) ? ref : undefined;
};

const separator = ',';

/** The failed set as the address has it. */
export const failedText = (failed: readonly ElementRef[]): string => failed.map(elementKey).join(separator);

/** Reads the failed set from the address; what names nothing that can fail is handed back as it stands there. */
export const readFailed = (
  design: Design,
  text: string,
): { readonly failed: readonly ElementRef[]; readonly unknown: readonly string[] } => {
  const failed = new Map<string, ElementRef>();
  const unknown: string[] = [];
  for (const key of text.split(separator).filter(Boolean)) {
    const ref = refOfKey(key);
    if (ref !== undefined && exists(design, ref)) failed.set(key, ref);
    else unknown.push(key);
  }
  return { failed: [...failed.values()], unknown };
};

/** Fails what stands, restores what had failed. */
export const toggled = (failed: readonly ElementRef[], ref: ElementRef): readonly ElementRef[] => {
  const key = elementKey(ref);
  const others = failed.filter((other) => elementKey(other) !== key);
  return others.length < failed.length ? others : [...failed, ref];
};

/** What a person calls what failed: 'fw-ho-2', 'fw-ho wan1', 'Gullhaven'. */
export const failedName = (design: Design, ref: ElementRef): string => {
  const device = ref.collection === 'devices' ? design.devices[ref.id] : undefined;
  return device?.kind === 'ha-pair' && ref.member !== undefined && ref.port === undefined
    ? device.memberNames[ref.member]
    : nameOf(design, ref);
};

export const failedKind = (design: Design, ref: ElementRef): string =>
  ref.member !== undefined && ref.port === undefined
    ? `Member of ${nameOf(design, { collection: 'devices', id: ref.id })}`
    : kindOf(design, ref);
