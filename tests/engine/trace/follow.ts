import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import type { ProbeInput } from '#engine/trace/probe.ts';
import type { TraceOptions } from '#engine/trace/trace-frame.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import type { Trace, TraceStep, Verdict } from '#engine/trace/trace.ts';

/** A design after some changes, which must leave it valid. */
export const changed = (design: Design, ...patches: readonly MergePatch[]): Design => {
  const parsed = parseDesign(patches.reduce((before, patch) => applyPatch(before, patch), design));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.problems));
  return parsed.value;
};

export const follow = (design: Design, probe: ProbeInput, options?: TraceOptions): Trace => {
  const answer = traceFrame(design, probe, options);
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer;
};

type IpPacket = Extract<ProbeInput['packet'], { kind: 'ip' }>;

/** An IPv4 packet from the head office's host to the first spoke's. */
export const packetTo = (
  host: string,
  packetBytes: number,
  more: Partial<IpPacket> & { readonly learned?: boolean } = {},
): ProbeInput => {
  const { learned = true, ...packet } = more;
  return {
    source: { host: 'h-s0-a' },
    destination: { kind: 'host', host, learned },
    packet: { kind: 'ip', version: 'ipv4', packetBytes, ...packet },
  };
};

export const arpFrom = (host: string): ProbeInput => ({
  source: { host },
  destination: { kind: 'broadcast' },
  packet: { kind: 'non-ip', frameBytes: 64, etherType: 0x0806 },
});

export const groupFrom = (host: string, group: string, more: Partial<IpPacket> = {}): ProbeInput => ({
  source: { host },
  destination: { kind: 'multicast', group },
  packet: {
    kind: 'ip',
    version: group.includes(':') ? 'ipv6' : 'ipv4',
    packetBytes: 100,
    ...more,
  },
});

export const reservedFrom = (host: string, octet: string): ProbeInput => ({
  source: { host },
  destination: { kind: 'reserved', octet },
  packet: { kind: 'non-ip', frameBytes: 64 },
});

export const verdictsOf = (trace: Trace): readonly Verdict[] =>
  trace.steps.flatMap(({ verdict }) => (verdict === undefined ? [] : [verdict]));

export const reasonsOf = (trace: Trace) =>
  verdictsOf(trace).flatMap((verdict) => (verdict.code === 'dropped' ? [verdict.reason] : []));

export const crossed = (trace: Trace, id: string): TraceStep => {
  const step = trace.steps.find(({ crossing }) => crossing?.id === id);
  if (step === undefined) throw new Error(`no hop crosses ${id}`);
  return step;
};

export const receivers = (trace: Trace): Readonly<Record<string, number | 'endless'>> =>
  Object.fromEntries(trace.deliveries.map(({ device, copies }) => [device, copies]));
