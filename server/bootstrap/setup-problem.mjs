/** Something that the person who typed the command can put right; its message is one clear sentence and needs no stack trace. */
export class SetupProblem extends Error {}

/**
 * What to tell the user about a failure; a bug keeps its stack trace.
 * @param {unknown} error
 * @returns {string}
 */
export function messageOf(error) {
  if (error instanceof SetupProblem) return error.message;
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
