import { describe, expect, test } from 'vitest';
import { nodeVersionProblem, satisfiesNodeRange } from '../../../server/bootstrap/node-version.mjs';

const range = '>=20.19 <21 || >=22.12';

describe('the Node version', () => {
  test.each(['20.19.0', '20.20.2', '22.12.0', '24.1.0'])('%s can run the program', (version) => {
    expect(satisfiesNodeRange(version, range)).toBe(true);
    expect(nodeVersionProblem(version, range)).toBeNull();
  });

  test.each(['18.20.4', '20.18.3', '21.7.0', '22.11.9'])(
    '%s is refused with what to install instead',
    (version) => {
      expect(nodeVersionProblem(version, range)).toBe(
        `Node ${version} cannot run Longpatch; install a version that satisfies '${range}' and start again.`,
      );
    },
  );
});
