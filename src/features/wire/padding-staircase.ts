import { IP_HEADER_BYTES, type IpVersion } from '../../engine/reference/ip.ts';
import { stackLayers } from '../../engine/wire/stack-layers.ts';
import type { Stack } from '../../engine/wire/stack.ts';

/** Inner packets of neighbouring lengths that all become outermost packets of one length. */
export interface Tread {
  readonly fromBytes: number;
  readonly toBytes: number;
  readonly outerBytes: number;
}

/** How many treads are shown on either side of the limit. */
const TREADS_PER_SIDE = 3;

/** The treads around the largest packet that passes: it ends the middle one. */
export function paddingStaircase(
  largestInnerPacketBytes: number,
  stack: Stack,
  innerIpVersion: IpVersion,
): readonly Tread[] {
  const outerOf = (innerPacketBytes: number): number | undefined => {
    const answer = stackLayers({ innerPacketBytes, innerIpVersion, stack });
    return answer.ok ? answer.totals.outerIpPacketBytes : undefined;
  };
  const treadAt = (bytes: number): Tread | undefined => {
    const outerBytes = outerOf(bytes);
    if (outerBytes === undefined) return undefined;
    let fromBytes = bytes;
    while (fromBytes > IP_HEADER_BYTES[innerIpVersion] && outerOf(fromBytes - 1) === outerBytes)
      fromBytes -= 1;
    let toBytes = bytes;
    while (outerOf(toBytes + 1) === outerBytes) toBytes += 1;
    return { fromBytes, toBytes, outerBytes };
  };

  const below: Tread[] = [];
  for (let at = treadAt(largestInnerPacketBytes); at !== undefined; at = treadAt(at.fromBytes - 1)) {
    below.unshift(at);
    if (below.length === TREADS_PER_SIDE) break;
  }
  const above: Tread[] = [];
  for (let at = treadAt(largestInnerPacketBytes + 1); at !== undefined; at = treadAt(at.toBytes + 1)) {
    above.push(at);
    if (above.length === TREADS_PER_SIDE) break;
  }
  return [...below, ...above];
}
