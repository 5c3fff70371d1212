import { z } from 'zod';
import { deviceSchema } from './devices.ts';
import { demandSchema, metaSchema, noteSchema, segmentSchema } from './intent.ts';
import { layoutSchema } from './layout.ts';
import { associationSchema, endpointSchema, forwarderSchema, tunnelSchema } from './overlay.ts';
import { idSchema } from './scalars.ts';
import { linkSchema, profileSchema, siteSchema, transportSchema } from './underlay.ts';

export const designFormat = 'longpatch.design/1';

/** The schema of one entry of each flat collection. */
export const entrySchemas = {
  sites: siteSchema,
  devices: deviceSchema,
  transports: transportSchema,
  links: linkSchema,
  endpoints: endpointSchema,
  associations: associationSchema,
  tunnels: tunnelSchema,
  forwarders: forwarderSchema,
  segments: segmentSchema,
  demands: demandSchema,
  profiles: profileSchema,
  notes: noteSchema,
} as const;

export type Collection = keyof typeof entrySchemas;
export const collections = Object.keys(entrySchemas) as readonly Collection[];

export const designSchema = z.strictObject({
  format: z.literal(designFormat, `expected "${designFormat}"`),
  meta: metaSchema,
  sites: z.record(idSchema, siteSchema),
  devices: z.record(idSchema, deviceSchema),
  transports: z.record(idSchema, transportSchema),
  links: z.record(idSchema, linkSchema),
  endpoints: z.record(idSchema, endpointSchema),
  associations: z.record(idSchema, associationSchema),
  tunnels: z.record(idSchema, tunnelSchema),
  forwarders: z.record(idSchema, forwarderSchema),
  segments: z.record(idSchema, segmentSchema),
  demands: z.record(idSchema, demandSchema),
  profiles: z.record(idSchema, profileSchema),
  notes: z.record(idSchema, noteSchema),
  layout: layoutSchema,
});

export type DeepReadonly<T> = T extends (infer E)[]
  ? readonly DeepReadonly<E>[]
  : T extends object
    ? { readonly [K in keyof T]: DeepReadonly<T[K]> }
    : T;

/** The stored document. */
export type Design = DeepReadonly<z.infer<typeof designSchema>>;
export type Entry<C extends Collection> = DeepReadonly<z.infer<(typeof entrySchemas)[C]>>;

/** Names one element of a design, as findings, selections and decorations do. A port needs its device. */
export interface ElementRef {
  readonly collection: Collection;
  readonly id: string;
  readonly port?: string;
  readonly member?: 1 | 2;
}

/** A design with nothing in it but a title. */
export const emptyDesign = (title: string): Design => ({
  format: designFormat,
  meta: { title },
  sites: {},
  devices: {},
  transports: {},
  links: {},
  endpoints: {},
  associations: {},
  tunnels: {},
  forwarders: {},
  segments: {},
  demands: {},
  profiles: {},
  notes: {},
  layout: {},
});
