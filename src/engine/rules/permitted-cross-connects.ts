import type { Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import { segmentsByForwarder } from './carried-segments.ts';

/** A cross-connect whose policy permits something: the others let nothing pass, which is one fault of its own. */
export interface PermittedCrossConnect {
  readonly id: string;
  readonly forwarder: Network['design']['forwarders'][string];
  readonly segments: readonly string[];
}

/** Cross-connects with a policy that permits something, in order of id. */
export const permittedCrossConnects = perNetwork((network): readonly PermittedCrossConnect[] =>
  Object.keys(network.design.forwarders)
    .sort()
    .flatMap((id) => {
      const forwarder = network.design.forwarders[id]!;
      if (forwarder.kind !== 'cross-connect') return [];
      if (!Object.values(forwarder.policy ?? {}).some(({ action }) => action === 'permit')) return [];
      return [{ id, forwarder, segments: segmentsByForwarder(network).get(id) ?? [] }];
    }),
);

export const permittedCrossConnectFacts = ['forwarders', 'gateways', 'segments', 'sites'] as const;
