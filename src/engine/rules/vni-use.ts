import type { DesignFacts } from '../network/network.ts';
import { LARGEST_VNI, MANAGEMENT_VNI } from '../reference/vxlan.ts';
import type { CheckContext } from './check-context.ts';

// RFC 8944 section 4 (0 depends on the implementation) and RFC 8971 section 4 (1 may be kept for management).
export const FIRST_PLAIN_VNI = MANAGEMENT_VNI + 1;
// Common practice, no source: five digits, so that no VNI is taken for a VLAN.
const FIRST_VNI_WITHOUT_POOL = 10_000;

const usedVnis = (design: DesignFacts, context: CheckContext): ReadonlySet<number> => {
  const used = new Set<number>();
  for (const tunnel of Object.values(design.tunnels))
    for (const { vni } of [tunnel.a, tunnel.b]) if (vni !== undefined) used.add(vni);
  for (const other of context.otherDesigns ?? []) for (const vni of other.vnis ?? []) used.add(vni);
  return used;
};

/**
 * The lowest VNIs that no tunnel of this design or another uses: from the pools where there are any, otherwise above the
 * highest in use here. Fewer than asked for when the numbers run out.
 */
export const freeVnis = (design: DesignFacts, context: CheckContext, count: number): readonly number[] => {
  const used = usedVnis(design, context);
  const highest = Object.values(design.tunnels)
    .flatMap(({ a, b }) => [a.vni ?? 0, b.vni ?? 0])
    .reduce((most, vni) => Math.max(most, vni), 0);
  const above = highest < FIRST_VNI_WITHOUT_POOL ? FIRST_VNI_WITHOUT_POOL : highest + 1;
  const ranges = context.pools?.vnis ?? [
    { from: above, to: LARGEST_VNI },
    { from: FIRST_PLAIN_VNI, to: above - 1 },
  ];
  const free: number[] = [];
  for (const { from, to } of ranges)
    for (let vni = Math.max(from, FIRST_PLAIN_VNI); vni <= to && free.length < count; vni += 1)
      if (!used.has(vni)) free.push(vni);
  return free;
};

/** True when no other tunnel at the endpoint has the VNI. */
export const isVniFreeAt = (design: DesignFacts, endpoint: string, vni: number, except: string): boolean =>
  Object.entries(design.tunnels).every(
    ([id, tunnel]) =>
      id === except || [tunnel.a, tunnel.b].every((end) => end.endpoint !== endpoint || end.vni !== vni),
  );

/** True when the pools hold the VNI, or there are none. */
export const isVniInPool = (context: CheckContext, vni: number): boolean =>
  context.pools?.vnis?.some(({ from, to }) => from <= vni && vni <= to) ?? true;
