import type { ElementRef } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';

export const severities = ['blocking', 'degrading', 'advisory'] as const;
/** Blocking: does not work or endangers the network. Degrading: works worse. Advisory: a risk, or a fact that is missing. */
export type Severity = (typeof severities)[number];

/** What a check rests on. */
export type Source = { readonly document: string; readonly clause?: string } | 'common practice, no source';

/** A field that the inspector marks: keys below the element's entry. */
export interface PropertyRef {
  readonly ref: ElementRef;
  readonly path: readonly string[];
}

/** How a fault shows on the sheet, beyond its balloon. */
export type Mark =
  | {
      readonly kind: 'cut';
      readonly tunnel: string;
      readonly vnis?: { readonly a?: number; readonly b?: number };
    }
  | {
      readonly kind: 'loop';
      readonly steps: readonly {
        readonly collection: 'tunnels' | 'links';
        readonly id: string;
        readonly direction: 'a-to-b' | 'b-to-a';
        readonly vlan?: number;
      }[];
    }
  | {
      readonly kind: 'ghost';
      readonly from: { readonly device: string; readonly port: string; readonly member?: 1 | 2 };
      readonly to: { readonly device: string; readonly port: string; readonly member?: 1 | 2 };
      readonly label: string;
    }
  | {
      readonly kind: 'overhang';
      readonly tunnel: string;
      readonly end: 'a' | 'b';
      readonly packetBytes: number;
      readonly mtuBytes: number;
    };

export type JsonValue =
  null | boolean | number | string | readonly JsonValue[] | { readonly [key: string]: JsonValue };

/** One fault of one design, in its own names and values. Survives JSON. */
export interface Finding {
  /** The same for the same fault, whatever its numbers are now; what a waiver is bound to. */
  readonly key: string;
  readonly rule: string;
  readonly severity: Severity;
  /** Why this one is milder or harder than the rule's usual severity. */
  readonly severityReason?: string;
  /** Without a final stop. */
  readonly sentence: string;
  /** Two or three words for the sheet. */
  readonly words: string;
  readonly why: string;
  readonly seen: string;
  readonly sources: readonly Source[];
  /** The first is where the balloon points. */
  readonly elements: readonly ElementRef[];
  readonly properties: readonly PropertyRef[];
  readonly values: { readonly [name: string]: JsonValue };
  /** Changes when the fault's values do, names aside: a waiver then lapses. */
  readonly fingerprint: string;
  readonly mark?: Mark;
}

/** A change that cures a finding. */
export interface Fix {
  readonly id: string;
  /** Short, for a button. */
  readonly label: string;
  /** What it will do. */
  readonly sentence: string;
  readonly patch: MergePatch;
}

const compareText = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0);

/** Most severe first, then by rule and key: one order everywhere. */
export const compareFindings = (a: Finding, b: Finding): number =>
  severities.indexOf(a.severity) - severities.indexOf(b.severity) ||
  compareText(a.rule, b.rule) ||
  compareText(a.key, b.key);
