/**
 * What one run of a command has started, to be stopped in reverse order whatever ends the run.
 * @typedef {ReturnType<typeof createLifetime>} Lifetime
 */
export function createLifetime() {
  const abort = new AbortController();
  /** @type {(() => unknown)[]} */
  const undo = [];
  return {
    /** Aborted as soon as the run is asked to end. */
    signal: abort.signal,
    /** @param {string | null} reason a sentence when something went wrong, null when somebody asked for the end */
    end(reason) {
      abort.abort(reason);
    },
    /** @param {() => unknown} stop */
    onEnd(stop) {
      undo.push(stop);
    },
    /**
     * Resolves with the reason once the run is to end.
     * @returns {Promise<string | null>}
     */
    async untilEnd() {
      if (!abort.signal.aborted) {
        await new Promise((resolve) => abort.signal.addEventListener('abort', resolve, { once: true }));
      }
      return abort.signal.reason;
    },
    /** Stops everything; one that fails does not keep the others from being stopped. */
    async stopAll() {
      /** @type {unknown[]} */
      const failures = [];
      for (const stop of undo.splice(0).reverse()) {
        try {
          await stop();
        } catch (error) {
          failures.push(error);
        }
      }
      if (failures.length > 0) throw failures[0];
    },
  };
}
