/** A run of numbers set aside for a purpose, both ends included. */
export interface NumberRange {
  readonly from: number;
  readonly to: number;
}

/** What the checks may know beyond the design: frozen beside a revision, so that they answer the same later. */
export interface CheckContext {
  readonly pools?: { readonly vnis?: readonly NumberRange[] };
  /** Numbers that the workspace's other designs hold. */
  readonly otherDesigns?: readonly { readonly vnis?: readonly number[] }[];
}

export const noContext: CheckContext = {};
