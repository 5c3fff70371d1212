import { patchListSchema, savedPatchesSchema } from '../contract/designs.ts';
import { callApi } from '../lib/api-client.ts';
import { asApiError } from '../lib/api-error.ts';
import type { OpenDesignServer, SaveFailure } from './open-design.ts';

const passing = new Set(['unavailable', 'internal', 'too-many-requests']);

const failureOf = (thrown: unknown): SaveFailure => {
  const error = asApiError(thrown);
  if (error.code === 'not-signed-in') return { kind: 'signed-out' };
  if (passing.has(error.code)) return { kind: 'unreachable' };
  return { kind: 'refused', message: error.message, problems: error.details };
};

/** The server's side of one open design. */
export const designServer = (designId: string): OpenDesignServer => {
  const path = `/api/designs/${encodeURIComponent(designId)}/patches`;
  return {
    save: (baseSequence, edits) =>
      callApi(savedPatchesSchema, path, { method: 'POST', body: { baseSequence, edits } }).catch(failureOf),
    patchesAfter: (sequence) => callApi(patchListSchema, `${path}?after=${sequence}`).catch(failureOf),
  };
};
