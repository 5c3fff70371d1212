import type { DeviceKind } from '../../engine/model/devices.ts';

// Every measure that routing and drawing share. World pixels, 1 px at 100 %; strokes are centred on the outline given here.

export interface Size {
  readonly width: number;
  readonly height: number;
}

/** Least size of a faceplate by kind; for a pair, of one member. Longer names and more ports make a plate grow. */
export const plateSizes: { readonly [kind in DeviceKind]: Size } = {
  firewall: { width: 136, height: 76 },
  router: { width: 136, height: 70 },
  switch: { width: 104, height: 62 },
  host: { width: 112, height: 42 },
  'ha-pair': { width: 138, height: 76 },
};

export const strip = { height: 27, glyphAt: 9, glyphSize: 18, nameAt: 34 } as const;
export const hostGlyphColumn = 27;
export const firewallChamfer = 7;
export const routerEnd = 18;

/** The second member of a pair stands this far right of and below the first. */
export const pair = { shift: 14, gap: 14 } as const;
/** A pair's bracket: its outer edge stands `reach` off the nearer member, its arms `inset` inside the members' outline. */
export const bracket = { stroke: 5, reach: 15, inset: 11, cornerRadius: 6 } as const;

export const pip = {
  size: 10,
  accessRadius: 5.3,
  wanReach: 7.2,
  memberLink: { width: 14, height: 6 },
  /** Least distance, centre to centre, on one edge. */
  spacing: 16,
  numberInset: 9,
  hitArea: 24,
} as const;

export const ring = {
  radius: 13.5,
  hole: 6.5,
  neckHeight: 10,
  /** Edge of a plate to the ring's centre; off a bracket a little more. */
  offPlate: 16,
  offBracket: 21,
  /** Ring's centre to the near edge of its first ferrule. */
  toFerrule: 17,
  /** Between two rings on one edge, centre to centre. */
  spacing: 32,
} as const;

export const comb = {
  /** Between ferrules of one group, and from the last of a group to the first of the next. */
  ferrulePitch: 25,
  groupPitch: 39,
  arm: 5,
  spine: 4,
  /** The spine's centre off the ring's centre. */
  spineAt: 16,
  /** How far the spine runs past the outer ferrules' centres. */
  overhang: 6,
  /** Between the combs of two rings on one edge, for the address under the upper one. */
  apart: 80,
} as const;

export const ferrule = { width: 70, height: 21, radius: 3, collar: 5, cap: 19, flagPitch: 78 } as const;
/** A ferrule grows with its number's digits; up to six fit the usual plate. */
export const ferruleWidth = (digits: number): number => ferrule.width + Math.max(0, digits - 6) * 9;

/** More groups than this at one ring are drawn as one brass bar. */
export const manifold = { mostGroups: 8, width: 44, height: 78 } as const;

export const cuff = { width: 9, perLane: 16, margin: 12, fromFerrule: 27, radius: 2 } as const;

export const lane = { pitch: 16, fallbackPitches: [12, 9] } as const;
export const jacketWidth = (lanes: number, pitch: number = lane.pitch): number => pitch * lanes + 4;
/** A bare cord's room: its hatch over an untrusted transport. */
export const bareWidth = 20;
export const cord = { casing: 11.8, core: 9, tracer: 8, radius: 58, shortRadius: 23 } as const;
/** Least radius of a jacket's centre line, so that its inner lane never turns tighter than 14 px. */
export const leastRadius = (lanes: number, pitch: number = lane.pitch): number =>
  14 + (pitch / 2) * (lanes - 1);
/** Room of a manifold's trunk that still holds this many jackets. */
export const trunkWidth = (jackets: number): number =>
  Math.min(60, 20 + 7 * Math.ceil(Math.log2(Math.max(1, jackets))));

export const cable = {
  stroke: 1.7,
  radius: 7,
  jogRadius: 5,
  lagGap: 8,
  lagEllipse: { width: 8, height: 20 },
} as const;
export const landing = { depth: 9, bar: { width: 3, height: 10 }, spacing: 14, fromJacket: 12 } as const;

export const band = {
  width: 122,
  trustedWidth: 92,
  edgeToJacket: 22,
  /** Lines of a band's words, baseline to baseline: name, kind and trust always, the others where they are known. */
  words: { always: 54, nameLine: 18, latency: 25, mtu: 21, mtuUnderLatency: 32, loss: 19 },
} as const;

/** Site frame to band edge. */
export const gutter = 24;

/** How much air `tidy` leaves round things; all of it horizontal. */
export interface Spacing {
  /** Site frame to band edge, at least: cuffs stand just outside the band. */
  readonly gutter: number;
  /** What a gutter may grow to where the sheet has width to spare. */
  readonly widestGutter: number;
  /** Frame of the sheet to what stands next to it. */
  readonly margin: number;
  /** In a row: frame to hosts, hosts to switch, switch to pair. */
  readonly row: { readonly lead: number; readonly hostsToSwitch: number; readonly switchToPair: number };
}
/** The usual spacing, and what is tried before a larger sheet is taken. */
export const spacings: { readonly roomy: Spacing; readonly snug: Spacing } = {
  roomy: { gutter, widestGutter: gutter, margin: 16, row: { lead: 14, hostsToSwitch: 26, switchToPair: 40 } },
  snug: {
    gutter: 13,
    widestGutter: gutter,
    margin: 6,
    row: { lead: 8, hostsToSwitch: 20, switchToPair: 30 },
  },
};
export const site = {
  /** Frame to a plate that has a ring or a host on that side, and to one that has none. */
  toCordedEdge: 122,
  toPlainEdge: 20,
  nameLine: 26,
  below: 14,
  nameAt: 20,
} as const;

/** A collapsed site in which nothing that a cord ends on is left to see. */
export const closedSite = { width: 190, height: 62 } as const;

export const text = {
  siteName: 16,
  deviceName: 16,
  hostName: 13.5,
  hostAddress: 12.5,
  label: 14,
} as const;
