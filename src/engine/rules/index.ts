import type { Rule } from './define-rule.ts';
import { tunnelVniMismatch } from './tunnel-vni-mismatch.ts';

/** Every check, one line each. */
export const rules: readonly Rule[] = [tunnelVniMismatch];
