import { espIntegrities, espTransforms, type EspIntegrityId, type EspTransformId } from '../reference/esp.ts';
import { STANDARD_PAYLOAD_BYTES } from '../reference/ethernet.ts';
import type { IpVersion } from '../reference/ip.ts';
import { wholeNumberProblems, type Problem } from './problem.ts';

interface EspSuite {
  readonly transform: EspTransformId;
  /** Absent beside a combined-mode transform; absent beside any other means encryption alone. */
  readonly integrity?: EspIntegrityId;
  /** ESP inside UDP port 4500. */
  readonly natTraversal: boolean;
}

export type EspTunnel = EspSuite & { readonly mode: 'tunnel'; readonly outerIp: IpVersion };
export type EspTransport = EspSuite & { readonly mode: 'transport' };
export type Esp = { readonly mode: 'none' } | EspTunnel | EspTransport;

export type TagCount = 0 | 1 | 2;

/** What is put around an inner IP packet between the host's port and the underlay. */
export interface Stack {
  /** VLAN tags that stay on the frame inside VXLAN. */
  readonly innerTags: TagCount;
  /** IP version of the VXLAN packet; none for a packet that is routed or sent as it is. */
  readonly vxlanOver: 'none' | IpVersion;
  /**
   * A host's port pads short frames, and bridges carry the padding along; a virtual port may leave them short
   * (`as-sent`). Padding is that of the untagged frame, tags come on top of it.
   */
  readonly innerFrames: 'padded' | 'as-sent';
  readonly esp: Esp;
  /** Bytes between the Ethernet header and the outermost IP packet. */
  readonly accessOverhead: 'none' | 'pppoe' | number;
  /** Largest Ethernet payload of the access link; it limits the IP packet only where there is access overhead. */
  readonly accessPayloadBytes: number;
  /** VLAN tags on the outermost frame. */
  readonly outerTags: TagCount;
}

/** A packet in a plain Ethernet frame: the starting point from which a caller describes its own stack. */
export const bareStack: Stack = {
  innerTags: 0,
  vxlanOver: 'none',
  innerFrames: 'padded',
  esp: { mode: 'none' },
  accessOverhead: 'none',
  accessPayloadBytes: STANDARD_PAYLOAD_BYTES,
  outerTags: 0,
};

export const MOST_TAGS = 2;
export const MOST_ACCESS_OVERHEAD_BYTES = 256;
export const LEAST_ACCESS_PAYLOAD_BYTES = 576;
export const MOST_ACCESS_PAYLOAD_BYTES = 65_535;

/** IP version of the outermost packet, given that of the inner one. */
export function outermostIpVersion(stack: Stack, innerIpVersion: IpVersion): IpVersion {
  if (stack.esp.mode === 'tunnel') return stack.esp.outerIp;
  return stack.vxlanOver === 'none' ? innerIpVersion : stack.vxlanOver;
}

/** What in a stack contradicts itself or lies out of bounds, in the order of its fields. */
export function stackProblems(stack: Stack): readonly Problem[] {
  const problems = [...wholeNumberProblems('stack.innerTags', stack.innerTags, 0, MOST_TAGS)];
  if (stack.vxlanOver === 'none' && stack.innerTags > 0) {
    problems.push({
      field: 'stack.innerTags',
      value: stack.innerTags,
      expected:
        '0 without VXLAN; give tags of the outermost frame as outerTags, or an IP version as vxlanOver',
    });
  }
  problems.push(...espProblems(stack.esp));
  if (typeof stack.accessOverhead === 'number') {
    problems.push(
      ...wholeNumberProblems('stack.accessOverhead', stack.accessOverhead, 0, MOST_ACCESS_OVERHEAD_BYTES),
    );
  }
  problems.push(
    ...wholeNumberProblems(
      'stack.accessPayloadBytes',
      stack.accessPayloadBytes,
      LEAST_ACCESS_PAYLOAD_BYTES,
      MOST_ACCESS_PAYLOAD_BYTES,
    ),
    ...wholeNumberProblems('stack.outerTags', stack.outerTags, 0, MOST_TAGS),
  );
  return problems;
}

function espProblems(esp: Esp): readonly Problem[] {
  if (esp.mode === 'none' || esp.integrity === undefined) return [];
  const { name, aead } = espTransforms[esp.transform];
  if (!aead) return [];
  return [
    {
      field: 'stack.esp.integrity',
      value: esp.integrity,
      expected: `nothing beside ${esp.transform}: ${name} protects integrity itself, so leave out ${espIntegrities[esp.integrity].name}`,
    },
  ];
}
