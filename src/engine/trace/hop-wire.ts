import type { Layer } from '../wire/layer.ts';
import { stackLayers } from '../wire/stack-layers.ts';
import type { Stack } from '../wire/stack.ts';
import type { TracedFrame } from './traced-frame.ts';
import type { HopWire } from './trace.ts';

type Bytes = Omit<HopWire, 'mtuBytes'> & { readonly outerIpVersion: 'ipv4' | 'ipv6' };

const withoutIp = (layer: Layer): Layer =>
  layer.id === 'inner-packet' ? { ...layer, name: 'Payload of the host' } : layer;

/** Computes the bytes of one frame in any stack, once for all stacks of one key; undefined for packets that no length field can name. */
export const bytesOnWire = (frame: TracedFrame): ((key: string, stack: Stack) => Bytes | undefined) => {
  const known = new Map<string, Bytes | undefined>();
  return (key, stack) => {
    if (known.has(key)) return known.get(key);
    const answer = stackLayers({
      innerPacketBytes: frame.payloadBytes,
      innerIpVersion: frame.ipVersion ?? 'ipv4',
      stack,
    });
    const bytes = answer.ok
      ? {
          layers: frame.ipVersion === undefined ? answer.layers.map(withoutIp) : answer.layers,
          outerIpPacketBytes: answer.totals.outerIpPacketBytes,
          frameBytes: answer.totals.frameBytes,
          outerIpVersion: answer.outerIpVersion,
        }
      : undefined;
    known.set(key, bytes);
    return bytes;
  };
};
