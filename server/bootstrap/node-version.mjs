/**
 * Whether a Node version lies in a range such as `>=20.19 <21 || >=22.12` (the form of `engines` in package.json).
 * Runs before any package is installed, and on versions too old for the rest of the program.
 * @param {string} version
 * @param {string} range
 * @returns {boolean}
 */
export function satisfiesNodeRange(version, range) {
  return range.split('||').some((alternative) =>
    alternative
      .trim()
      .split(/\s+/)
      .every((bound) => {
        const isMinimum = bound.startsWith('>=');
        const difference = compareVersions(version, bound.replace(/^(>=|<)/, ''));
        return isMinimum ? difference >= 0 : difference < 0;
      }),
  );
}

/**
 * The sentence for a Node version that cannot run Longpatch, or null.
 * @param {string} version
 * @param {string} range
 * @returns {string | null}
 */
export function nodeVersionProblem(version, range) {
  if (satisfiesNodeRange(version, range)) return null;
  return `Node ${version} cannot run Longpatch; install a version that satisfies '${range}' and start again.`;
}

/**
 * @param {string} left
 * @param {string} right
 */
function compareVersions(left, right) {
  const [leftParts, rightParts] = [left, right].map((version) => version.split('.').map(Number));
  for (let index = 0; index < 3; index += 1) {
    const difference = ((leftParts || [])[index] || 0) - ((rightParts || [])[index] || 0);
    if (difference !== 0) return difference;
  }
  return 0;
}
