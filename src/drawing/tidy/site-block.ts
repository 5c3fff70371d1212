import type { Point } from '../geometry.ts';
import { cuff, ferrule, pair, plateSizes, ring, site as siteSizes, bracket, strip } from '../parts/sizes.ts';
import type { Size, Spacing } from '../parts/sizes.ts';
import { plateSize } from '../routing/stands.ts';
import type { CombNeed, Device, Level, Named, SiteParts } from './site-parts.ts';

/** A site laid out on its own: device positions from the frame's top left corner, and the frame's size. */
export interface SiteBlock {
  readonly positions: ReadonlyMap<string, Point>;
  readonly size: Size;
}

const hostPitch = { stack: 48, row: 50 } as const;
/** Under the lowest ferrule: the ring's address, and air. */
const labelRoom = 26;
const cuffOutside = 8;

export const sizeOfDevice = (device: Device, load = { upright: 0, level: 0, rings: 1 }): Size => {
  const plate = plateSize(device, load);
  return device.kind === 'ha-pair'
    ? { width: plate.width + pair.shift, height: 2 * plate.height + pair.gap }
    : plate;
};

/** Frame to plate on a side that carries a comb. */
const combZone = (need: CombNeed, side: Level): number =>
  siteSizes.toCordedEdge + need.ferruleWidth[side] - ferrule.width;

/** Room beside a bracket for ring, comb and tails, up to the frame. */
const bracketZone = (need: CombNeed, side: Level): number =>
  bracket.reach + ring.offBracket + ring.toFerrule + need.ferruleWidth[side] + cuff.fromFerrule - cuffOutside;

/** One gateway over its switch, hosts to the left and right of that. */
export const stackBlock = (parts: SiteParts, need: CombNeed): SiteBlock => {
  const [gatewayId, gateway] = parts.gateways[0]!;
  const access: Named | undefined = parts.switches[0];
  const { hosts } = parts;
  const plate = sizeOfDevice(gateway, { upright: 0, level: 0, rings: Math.max(1, need.rings) });
  const length = Math.max(need.length.left ?? 0, need.length.right ?? 0);
  const ringY = length > 60 ? length / 2 + 63 : Math.max(80, length / 2 + 67);
  const dock = Math.min(54, plate.height - 20);
  const top = ringY - dock;
  const underComb = ringY + length / 2 + ferrule.height / 2 + labelRoom;
  const positions = new Map<string, Point>();

  const sides: { readonly [side in Level]: readonly Named[] } =
    access === undefined
      ? { left: [], right: [] }
      : {
          left: hosts.filter((_, i) => i % 2 === 0),
          right: hosts.filter((_, i) => i % 2 === 1),
        };
  const fuller = Math.max(sides.left.length, sides.right.length);
  const switchSize =
    access === undefined
      ? plateSizes.switch
      : plateSize(access[1], { upright: fuller, level: freePorts(access[1], hosts.length + 1), rings: 0 });
  const widest = (side: Level): number =>
    Math.max(0, ...sides[side].map(([, host]) => plateSize(host).width));
  const overhang = (switchSize.width - plate.width) / 2;
  const pad = (side: Level, gap: number, outside: number): number =>
    Math.max(
      need.length[side] === undefined ? siteSizes.toPlainEdge : combZone(need, side),
      siteSizes.toPlainEdge + overhang,
      sides[side].length === 0 ? 0 : siteSizes.toCordedEdge,
      sides[side].length === 0 ? 0 : widest(side) + gap + outside + overhang,
    );
  const left = pad('left', 19, 7);
  const right = pad('right', 15, 11);
  positions.set(gatewayId, { x: left, y: top });
  let bottom = Math.max(top + plate.height, underComb - labelRoom + 22);

  if (access !== undefined) {
    const middle = (switchSize.height + strip.height) / 2;
    const hostsUp = (side: Level): number =>
      sides[side].length === 0 ? -Infinity : ((sides[side].length - 1) * hostPitch.stack) / 2 + 21 - middle;
    const y = Math.max(
      top + plate.height + 30,
      ringY + length / 2 + 36,
      ...(['left', 'right'] as const).map((side) =>
        need.length[side] === undefined
          ? siteSizes.nameLine + 8 + hostsUp(side)
          : underComb + 4 + hostsUp(side),
      ),
    );
    const x = left + plate.width / 2 - switchSize.width / 2;
    positions.set(access[0], { x, y });
    bottom = Math.max(bottom, y + switchSize.height);
    for (const side of ['left', 'right'] as const)
      sides[side].forEach(([id, host], i) => {
        const size = plateSize(host);
        const centre = y + middle + (i - (sides[side].length - 1) / 2) * hostPitch.stack;
        positions.set(id, {
          x: side === 'left' ? x - 19 - size.width : x + switchSize.width + 15,
          y: centre - size.height / 2,
        });
        bottom = Math.max(bottom, centre + size.height / 2);
      });
    return { positions, size: { width: left + plate.width + right, height: bottom + siteSizes.below } };
  }
  if (hosts.length === 0)
    return { positions, size: { width: left + plate.width + right, height: bottom + siteSizes.below } };

  // No switch: the hosts stand in a row under the gateway.
  const sizes = hosts.map(([, host]) => plateSize(host));
  const total = sizes.reduce((sum, size) => sum + size.width, 0) + 14 * (hosts.length - 1);
  const y = Math.max(top + plate.height + 44, underComb + 4);
  const spare = Math.max(0, (total + 14 - plate.width) / 2);
  const shift = Math.max(0, spare - left);
  let x = left + shift + plate.width / 2 - total / 2;
  positions.set(gatewayId, { x: left + shift, y: top });
  hosts.forEach(([id], i) => {
    positions.set(id, { x, y });
    x += sizes[i]!.width + 14;
  });
  return {
    positions,
    size: {
      width: left + shift + plate.width + Math.max(right, spare),
      height: y + Math.max(...sizes.map((size) => size.height)) + siteSizes.below,
    },
  };
};

const freePorts = (device: Device, cabled: number): number =>
  Math.max(0, Object.keys(device.ports).length - cabled);

/** Hosts, switch and HA pair in a row towards the band. */
export const rowBlock = (
  parts: SiteParts,
  need: CombNeed,
  facing: Level,
  { lead, hostsToSwitch, switchToPair }: Spacing['row'],
): SiteBlock => {
  const [pairId, pairDevice] = parts.gateways[0]!;
  const access = parts.switches[0];
  const pairSize = sizeOfDevice(pairDevice);
  const both = [need.length.left, need.length.right].filter((length) => length !== undefined);
  const length = both.reduce((sum, l) => sum + l, 0) + 80 * Math.max(0, both.length - 1);
  const hostSizes = parts.hosts.map(([, host]) => plateSize(host));
  const hostWidth = Math.max(0, ...hostSizes.map((size) => size.width));
  const uplinks = 2;
  const switchSize =
    access === undefined
      ? { width: 0, height: 0 }
      : plateSize(access[1], {
          upright: Math.max(parts.hosts.length, uplinks),
          level: freePorts(access[1], parts.hosts.length + uplinks),
          rings: 0,
        });
  const half = pairSize.height / 2;
  const hostsHalf = parts.hosts.length === 0 ? 0 : ((parts.hosts.length - 1) * hostPitch.row) / 2 + 21;
  const switchUp = (switchSize.height + strip.height) / 2;
  const cables = Math.max(1, Object.values(pairDevice.ports).filter((port) => port.role === 'wan').length);
  const above = Math.max(
    half + siteSizes.nameLine + 22,
    half + 18 + 28 + 14 * (cables - 1),
    length / 2 + ferrule.height / 2 + 15 + 28 + 14 * (cables - 1),
    hostsHalf + siteSizes.nameLine + 8,
    switchUp + siteSizes.nameLine + 8,
  );
  const below = Math.max(
    half + 18 + 28 + 14 * (cables - 1),
    length / 2 + ferrule.height / 2 + labelRoom + 12 + 20 + 14 * (cables - 1),
    hostsHalf + siteSizes.below,
    switchSize.height - switchUp + siteSizes.below,
  );
  const centre = Math.round(above);
  const zone = bracketZone(need, facing);
  const hostsSpace = parts.hosts.length === 0 ? 0 : hostWidth + hostsToSwitch;
  const switchSpace = access === undefined ? 0 : switchSize.width + switchToPair;
  const width =
    (parts.hosts.length === 0 ? siteSizes.toPlainEdge : lead) +
    hostsSpace +
    switchSpace +
    pairSize.width +
    zone;
  const positions = new Map<string, Point>();
  const put = (id: string, x: number, y: number, w: number): void => {
    positions.set(id, { x: facing === 'right' ? x : width - x - w, y });
  };
  let x = parts.hosts.length === 0 ? siteSizes.toPlainEdge : lead;
  parts.hosts.forEach(([id], i) => {
    const size = hostSizes[i]!;
    const y = centre + (i - (parts.hosts.length - 1) / 2) * hostPitch.row - size.height / 2;
    put(id, x + hostWidth - size.width, y, size.width);
  });
  x += hostsSpace;
  if (access !== undefined) put(access[0], x, centre - switchUp, switchSize.width);
  x += switchSpace;
  put(pairId, x, centre - half, pairSize.width);
  return { positions, size: { width, height: Math.round(above + below) } };
};

/**
 * Hosts, switches and gateways in columns towards the band: for sites that neither of our own layouts fits, while no
 * better one was computed.
 */
export const columnsBlock = (
  parts: SiteParts,
  needOf: (device: string) => CombNeed,
  facing: Level,
): SiteBlock => {
  const perColumn = 8;
  const hostColumns = Array.from({ length: Math.ceil(parts.hosts.length / perColumn) }, (_, i) =>
    parts.hosts.slice(i * perColumn, (i + 1) * perColumn),
  );
  const columns = [...hostColumns, parts.switches, parts.gateways].filter((column) => column.length > 0);
  if (columns.length === 0) return { positions: new Map(), size: { width: 240, height: 110 } };
  const roomOf = ([id, device]: Named): Size & { readonly above: number } => {
    const size = sizeOfDevice(device, { upright: 6, level: 5, rings: 2 });
    if (device.kind === 'host') return { ...plateSize(device), above: 0 };
    const need = needOf(id);
    const length = Math.max(need.length.left ?? 0, need.length.right ?? 0);
    const above = Math.max(0, length / 2 + 44 - size.height / 2) + (device.kind === 'ha-pair' ? 34 : 0);
    return {
      width: size.width,
      height: size.height + above + Math.max(0, length / 2 + 50 - size.height / 2),
      above,
    };
  };
  const heights = columns.map((column) =>
    column.reduce((sum, named) => sum + roomOf(named).height + (named[1].kind === 'host' ? 14 : 34), 0),
  );
  const tallest = Math.max(...heights);
  const zones = parts.gateways.map(([id, device]) =>
    device.kind === 'ha-pair' ? bracketZone(needOf(id), facing) : combZone(needOf(id), facing),
  );
  const lead = parts.hosts.length === 0 ? siteSizes.toPlainEdge : 14;
  const widths = columns.map((column) => Math.max(...column.map((named) => roomOf(named).width)));
  const width =
    lead +
    widths.reduce((sum, w) => sum + w, 0) +
    48 * (columns.length - 1) +
    Math.max(siteSizes.toPlainEdge, ...zones);
  const positions = new Map<string, Point>();
  let x = lead;
  columns.forEach((column, c) => {
    let y = siteSizes.nameLine + 6 + (tallest - heights[c]!) / 2;
    for (const named of column) {
      const room = roomOf(named);
      positions.set(named[0], {
        x: facing === 'right' ? x : width - x - sizeOfDevice(named[1]).width,
        y: y + room.above,
      });
      y += room.height + (named[1].kind === 'host' ? 14 : 34);
    }
    x += widths[c]! + 48;
  });
  return { positions, size: { width, height: siteSizes.nameLine + tallest + siteSizes.below } };
};

/** A layout made for a band on the right, turned round for one on the left. */
export const mirrored = (block: SiteBlock, widthOf: (device: string) => number): SiteBlock => ({
  ...block,
  positions: new Map(
    [...block.positions].map(([id, { x, y }]) => [id, { x: block.size.width - x - widthOf(id), y }]),
  ),
});
