import type { Design, ElementRef } from '../engine/model/design.ts';
import type { Member } from '../engine/model/devices.ts';
import { landPort, pullCable, whyNoCable, whyNoLanding } from '../workspace/operations/connect-ports.ts';
import { whyNoTunnel } from '../workspace/operations/join-endpoints.ts';
import { moveEndpointTo } from '../workspace/operations/move-parts.ts';
import type { NewId, Operation } from '../workspace/operations/operation.ts';
import { refused } from '../workspace/operations/operation.ts';
import { bodyHandle, readPipHandle } from './design-to-flow.ts';

/** Something that a cable or a cord can be pulled from or to. */
export type ConnectEnd =
  | { readonly kind: 'device'; readonly id: string; readonly port?: string; readonly member?: Member }
  | { readonly kind: 'endpoint'; readonly id: string }
  | { readonly kind: 'transport'; readonly id: string };

/** The end that a node of the canvas and one of its handles stand for. */
export const endOf = (
  nodeId: string | null | undefined,
  handleId: string | null | undefined,
): ConnectEnd | undefined => {
  const [collection, id] = nodeId?.split('/') ?? [];
  if (id === undefined) return undefined;
  if (collection === 'endpoints') return { kind: 'endpoint', id };
  if (collection === 'transports') return { kind: 'transport', id };
  if (collection !== 'devices') return undefined;
  const pip =
    handleId === bodyHandle || handleId === null || handleId === undefined
      ? undefined
      : readPipHandle(handleId);
  return { kind: 'device', id, ...pip };
};

export const refOfEnd = (end: ConnectEnd): ElementRef =>
  end.kind === 'device'
    ? {
        collection: 'devices',
        id: end.id,
        ...(end.port === undefined ? {} : { port: end.port }),
        ...(end.member === undefined ? {} : { member: end.member }),
      }
    : { collection: end.kind === 'endpoint' ? 'endpoints' : 'transports', id: end.id };

const cableEnd = (end: ConnectEnd & { readonly kind: 'device' }) => ({
  device: end.id,
  port: end.port,
  member: end.member,
});

/** Why two ends can't be connected, in words for the person who tried; undefined when they can. */
export const whyNotConnect = (design: Design, a: ConnectEnd, b: ConnectEnd): string | undefined => {
  if (a.kind === 'device' && b.kind === 'device') return whyNoCable(design, cableEnd(a), cableEnd(b));
  if (a.kind === 'device' && b.kind === 'transport') return whyNoLanding(design, cableEnd(a), b.id);
  if (a.kind === 'endpoint' && b.kind === 'endpoint') return whyNoTunnel(design, a.id, b.id);
  if (a.kind === 'endpoint' && b.kind === 'device') {
    const docked = moveEndpointTo(design, a.id, b.id);
    return docked.ok ? undefined : docked.why;
  }
  if (a.kind === 'endpoint' && b.kind === 'transport')
    return 'A ring lands on no transport: its device does, by a WAN port. Pull the cord to another ring.';
  if (a.kind === 'transport' && b.kind === 'transport')
    return 'Two transports are not joined by a cable: a router between them would be.';
  return whyNotConnect(design, b, a);
};

/** What connecting two ends does; a tunnel asks for its VNI and association first. */
export const connectEnds = (
  design: Design,
  a: ConnectEnd,
  b: ConnectEnd,
  newId: NewId,
): { readonly ask: 'tunnel'; readonly a: string; readonly b: string } | Operation => {
  const why = whyNotConnect(design, a, b);
  if (why !== undefined) return refused(why);
  if (a.kind === 'device' && b.kind === 'device') return pullCable(design, cableEnd(a), cableEnd(b), newId);
  if (a.kind === 'device' && b.kind === 'transport') return landPort(design, cableEnd(a), b.id, newId);
  if (a.kind === 'endpoint' && b.kind === 'endpoint') return { ask: 'tunnel', a: a.id, b: b.id };
  if (a.kind === 'endpoint' && b.kind === 'device') return moveEndpointTo(design, a.id, b.id);
  return connectEnds(design, b, a, newId);
};
