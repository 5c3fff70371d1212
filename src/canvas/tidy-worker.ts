import { tidy } from '../drawing/tidy/tidy.ts';
import type { TidyOptions } from '../drawing/tidy/tidy.ts';
import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';

export interface TidyRequest {
  readonly design: Design;
  readonly options: TidyOptions;
}
export type TidyAnswer = { readonly patch: MergePatch } | { readonly failed: string };

const post = (answer: TidyAnswer): void => self.postMessage(answer);

self.onmessage = ({ data: { design, options } }: MessageEvent<TidyRequest>): void => {
  try {
    post({ patch: tidy(design, options) });
  } catch (error) {
    post({ failed: error instanceof Error ? error.message : String(error) });
  }
};
