/** What a list needs from whoever can comment on its findings. */
export interface CommentingTools {
  readonly onComment: (findingKey: string) => void;
  /** Sends a cure to who edits the design; for readers who can't apply it themselves. */
  readonly onSuggest?: ((findingKey: string, fixId: string) => void) | undefined;
}
