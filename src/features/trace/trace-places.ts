import type { ComboOption } from '../../components/combo-cell.tsx';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { deviceKindNames, nameOf } from '../../workspace/operations/name-of.ts';
import { sourceText } from './trace-address.ts';
import type { TraceSource } from './trace-question.ts';

const { compare } = new Intl.Collator('en', { numeric: true });
const byLabel = (a: ComboOption, b: ComboOption): number => compare(a.label, b.label);

const details = (...parts: readonly (string | undefined)[]): string =>
  parts.filter((part) => part !== undefined && part !== '').join(', ');

/** The hosts of a design, by name, each with its site and addresses. */
export const hostOptions = (design: Design): readonly ComboOption[] =>
  Object.entries(design.devices)
    .flatMap(([id, device]): readonly ComboOption[] =>
      device.kind !== 'host'
        ? []
        : [
            {
              value: id,
              label: device.name,
              detail: details(
                device.site === undefined ? undefined : design.sites[device.site]?.name,
                (device.addresses ?? []).map((address) => address.split('/')[0]).join(', '),
              ),
            },
          ],
    )
    .sort(byLabel);

/** Every port of the other devices at which a frame can come in from outside; of a pair each member's. */
const portOptions = (design: Design): readonly ComboOption[] =>
  Object.entries(design.devices)
    .flatMap(([device, entry]): readonly ComboOption[] => {
      if (entry.kind === 'host' || entry.kind === 'router') return [];
      const site = entry.site === undefined ? undefined : design.sites[entry.site]?.name;
      const members = entry.kind === 'ha-pair' ? ([1, 2] as const) : [undefined];
      return Object.entries(entry.ports).flatMap(([port, { role }]) =>
        role === 'wan' || role === 'member-link'
          ? []
          : members.map((member) => {
              const source = { device, port, ...(member === undefined ? {} : { member }) };
              return {
                value: sourceText(source),
                label: nameOf(design, { collection: 'devices', id: device, port, ...(member && { member }) }),
                detail: details(`port of a ${deviceKindNames[entry.kind]}`, site),
              };
            }),
      );
    })
    .sort(byLabel);

/** Where a frame can start: hosts first, then ports. */
export const sourceOptions = (design: Design): readonly ComboOption[] => [
  ...hostOptions(design),
  ...portOptions(design),
];

/** What a press on a part of the sheet means as an end of a trace: that end, or why it is none. */
export type Picked =
  { readonly ok: true; readonly source: TraceSource } | { readonly ok: false; readonly why: string };

export const pickedEnd = (design: Design, ref: ElementRef, end: 'from' | 'to'): Picked => {
  const wanted = end === 'to' ? 'a host' : 'a host, or a port of a switch or a gateway';
  const device = ref.collection === 'devices' ? design.devices[ref.id] : undefined;
  if (device === undefined)
    return { ok: false, why: `${nameOf(design, ref)} can’t be an end of a trace. Pick ${wanted}.` };
  if (device.kind === 'host') return { ok: true, source: { host: ref.id } };
  if (end === 'to')
    return { ok: false, why: `${device.name} is no host. Frames are followed to a host: pick one.` };
  if (ref.port === undefined)
    return {
      ok: false,
      why: `${device.name} has several ports. Pick the port where the frame comes in, or a host.`,
    };
  return {
    ok: true,
    source: {
      device: ref.id,
      port: ref.port,
      ...(device.kind === 'ha-pair' ? { member: ref.member ?? 1 } : {}),
    },
  };
};
