import { z } from 'zod';

// eslint-disable-next-line no-control-regex
const noControls = /^[^\u0000-\u001f\u007f]*$/;

/** A name on one line; `missing` says what is expected where nothing was typed. */
export const oneLineSchema = (missing: string) =>
  z
    .string()
    .trim()
    .min(1, missing)
    .max(80, 'expected at most 80 characters')
    .regex(noControls, 'expected one line without control characters');
