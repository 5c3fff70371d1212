import type { DeviceKind, Member } from '../engine/model/devices.ts';
import type { SheetSize, Side } from '../engine/model/layout.ts';

// What `route` answers and everything that draws consumes. World pixels, y down, 1 px at 100 %.

export interface Point {
  readonly x: number;
  readonly y: number;
}
export interface Rect extends Point {
  readonly width: number;
  readonly height: number;
}

export interface SheetFrame {
  readonly size: SheetSize;
  readonly width: number;
  readonly height: number;
  /** Inside of the trim line and its zone grid; everything drawn stays in it. */
  readonly frame: Rect;
  readonly columns: number;
  readonly rows: number;
  readonly titleBlock: Rect;
  readonly legend: Rect;
}

export interface SiteGeometry {
  readonly id: string;
  readonly rect: Rect;
  readonly collapsed: boolean;
  /** On which side of a collapsed site its lower edge is free of a ring's address. */
  readonly free?: 'left' | 'right';
}

/** How a band's text found its place: in the band, turned along its edge, on paper beside it, or its name alone. */
export interface BandText {
  readonly mode: 'in' | 'turned' | 'beside' | 'name-only';
  readonly rect: Rect;
}
export interface BandGeometry {
  readonly id: string;
  /** Parallel rectangles, at their real width after routing. */
  readonly limbs: readonly Rect[];
  readonly header?: Rect;
  readonly orientation: 'vertical' | 'horizontal';
  readonly text: BandText;
}

export type PipShape = 'square' | 'round' | 'lozenge' | 'bar';
export interface PipGeometry {
  readonly device: string;
  readonly port: string;
  readonly member?: Member;
  readonly at: Point;
  readonly side: Side;
  readonly shape: PipShape;
  readonly cabled: boolean;
}
export interface PlateGeometry {
  readonly member?: Member;
  readonly rect: Rect;
}
export interface DeviceGeometry {
  readonly id: string;
  readonly kind: DeviceKind;
  /** One plate, or the two members of a pair in order. */
  readonly plates: readonly PlateGeometry[];
  /** A pair's bracket: the side it stands on and its outer box. */
  readonly bracket?: { readonly side: Side; readonly rect: Rect };
  /** A host cabled on its left edge carries its glyph on the right. */
  readonly mirrored: boolean;
  readonly pips: readonly PipGeometry[];
  /** Bounds of plates and bracket, pips left out. */
  readonly rect: Rect;
}

/** Which end of its tunnel or association a thing belongs to. */
export type EndName = 'a' | 'b';

export interface FerruleGeometry {
  readonly tunnel: string;
  readonly end: EndName;
  readonly rect: Rect;
  /** The cap is always on the cord's side. */
  readonly capSide: Side;
}
/** The tunnels of one association (or one bare tunnel) where they leave a ring. */
export interface CombGroup {
  readonly jacket: string;
  /** Counts the further jackets of one association that joins several pairs of endpoints; 0 or absent for the first. */
  readonly part?: number;
  readonly end: EndName;
  /** Centre of the cuff, or of the cord where it is bare, and the direction away from the device. */
  readonly mouth: Point;
  readonly ferrules: readonly FerruleGeometry[];
}
export interface RingGeometry {
  readonly endpoint: string;
  readonly device: string;
  readonly side: Side;
  readonly centre: Point;
  readonly docksOn: 'plate' | 'bracket';
  /** Absent with a single tunnel. */
  readonly comb?: { readonly arm: readonly [Point, Point]; readonly spine: readonly [Point, Point] };
  readonly groups: readonly CombGroup[];
  /** Present with more than eight groups: they are drawn as one brass bar, whose box stands for every ferrule. */
  readonly manifold?: { readonly rect: Rect; readonly tunnels: number };
  readonly label: LabelGeometry;
}

export interface LabelGeometry {
  readonly text: string;
  /** On the baseline, at the text's start, middle or end as `anchor` says. */
  readonly at: Point;
  readonly anchor: 'start' | 'middle' | 'end';
  readonly rect: Rect;
}

/** A piece of a smooth path; `arc` is a quarter circle, `curve` a cubic. */
export type PathStep =
  | { readonly kind: 'move'; readonly to: Point }
  | { readonly kind: 'line'; readonly to: Point }
  | { readonly kind: 'arc'; readonly to: Point; readonly radius: number; readonly clockwise: boolean }
  | { readonly kind: 'curve'; readonly c1: Point; readonly c2: Point; readonly to: Point };
export type Path = readonly PathStep[];

export interface LaneGeometry {
  readonly tunnel: string;
  /** Cuff to cuff, in the direction from the tunnel's own end a to its end b. */
  readonly path: Path;
  /** Ferrule to cuff at each end of the tunnel; empty where the lane comes out of a trunk. */
  readonly tails: { readonly a: Path; readonly b: Path };
}
export interface JacketGeometry {
  /** An association's id, or a bare tunnel's. */
  readonly id: string;
  /** Counts the further jackets of one association that joins several pairs of endpoints; 0 or absent for the first. */
  readonly part?: number;
  readonly kind: 'jacket' | 'bare';
  readonly transport?: string;
  /** Centre line from mouth a to mouth b: corners in order, with their radii (one per inner corner). */
  readonly polyline: readonly Point[];
  readonly radii: readonly number[];
  readonly path: Path;
  readonly width: number;
  readonly pitch: number;
  readonly lanes: readonly LaneGeometry[];
  readonly cuffs: readonly { readonly end: EndName; readonly rect: Rect; readonly side: Side }[];
  /** Pieces that pass over another jacket and wear a halo in the colour beneath. */
  readonly crossings: readonly {
    readonly over: string;
    readonly path: Path;
    readonly ground: 'band' | 'paper';
  }[];
  /** The part that lies over an untrusted band (bare tunnels wear hatch there). */
  readonly overBand: readonly Path[];
  /** True when no way was found: a dashed straight leader between the mouths. */
  readonly noWay: boolean;
}

/**
 * The common way of the jackets of one manifold, thinning as they part towards their sites. Each of its jackets begins
 * or ends at the trunk's edge, with a cuff as its collar.
 */
export interface TrunkGeometry {
  readonly endpoint: string;
  /** False when every cord in it is bare. */
  readonly isProtected: boolean;
  /** Thinnest first, so that thicker ones cover their ends; joints are round. */
  readonly pieces: readonly {
    readonly path: Path;
    readonly width: number;
    /** Jackets and bare tunnels still in it. */
    readonly jackets: readonly string[];
  }[];
}

export interface CableGeometry {
  /** All links of one aggregation share a line; otherwise one. */
  readonly links: readonly string[];
  readonly polyline: readonly Point[];
  readonly radius: number;
  readonly path: Path;
  readonly aggregated: boolean;
  /** The bar a landing ends on, inside the band. */
  readonly landing?: { readonly transport: string; readonly bar: Rect };
  readonly label?: LabelGeometry;
  readonly crossings: readonly Point[];
  readonly noWay: boolean;
}

/**
 * Something that found no room; shown as an advisory together with an offer to tidy. `sheet`: sites that lie outside the
 * largest sheet there is, by their ids.
 */
export interface Crowded {
  readonly what: 'overlap' | 'no-way' | 'text' | 'sheet';
  readonly ids: readonly string[];
}

/** What stands at the edge of a sheet for the far ends of cords and cables that lie on another one. */
export interface FlagGeometry {
  /** The id that its rings and cables know it by. */
  readonly id: string;
  /** The sheet that it leads to. */
  readonly sheet: number;
  /** The far device, where it stands for one alone. */
  readonly device?: string;
  readonly head: string;
  readonly lines: readonly string[];
  /** Towards the sheet's middle; the other end points off the sheet. */
  readonly looks: 'left' | 'right';
  readonly rect: Rect;
  readonly pips: readonly PipGeometry[];
}

export interface SheetGeometry {
  readonly sheet: SheetFrame;
  readonly sites: readonly SiteGeometry[];
  readonly bands: readonly BandGeometry[];
  readonly devices: readonly DeviceGeometry[];
  readonly rings: readonly RingGeometry[];
  readonly jackets: readonly JacketGeometry[];
  readonly trunks: readonly TrunkGeometry[];
  readonly cables: readonly CableGeometry[];
  /** Of one sheet of several; rings of a flag are among the others. */
  readonly flags?: readonly FlagGeometry[];
  /** `at` is the top left corner of a note's words, `rect` the room kept for them at 14 px; standing notes leave 18 px for their number and 26 px above the first for a heading. */
  readonly notes: readonly {
    readonly id: string;
    readonly at: Point;
    readonly standing: boolean;
    readonly rect: Rect;
  }[];
  readonly crowded: readonly Crowded[];
}
