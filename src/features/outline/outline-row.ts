import type { Detachment } from '../../canvas/actions/element-actions.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';
import type { Severity } from '../../engine/rules/finding.ts';

export type OutlineGroup = 'sites' | 'transports' | 'associations' | 'bare-tunnels' | 'segments' | 'notes';

/** One line of the outline, with what stands beneath it. */
export interface OutlineRow {
  /** Unique in the outline: the way from its root. An element that is named twice has two rows. */
  readonly key: string;
  /** Absent for the heads of the groups. */
  readonly ref?: ElementRef;
  readonly group?: OutlineGroup;
  /** A member of a pair: named by its own name, removed only with its pair. */
  readonly member?: Member;
  /** This is where the element stands; elsewhere it is only named again. */
  readonly isOwn: boolean;
  readonly detach?: Detachment;
  /** The trade's word for what it is. */
  readonly kind: string;
  readonly name: string;
  /** What the drawing says of it, each in few words. */
  readonly facts: readonly string[];
  /** The findings about it and about all beneath it, each counted once. */
  readonly counts: { readonly [S in Severity]: number };
  readonly children: readonly OutlineRow[];
}
