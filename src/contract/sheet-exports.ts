import { z } from 'zod';

export const exportLooks = ['paper', 'slate', 'print', 'print-colour'] as const;
export const exportLayers = ['cabling', 'underlay', 'overlay'] as const;
/** Papers of ISO 216, lying on their long side. */
export const exportPapers = ['A4', 'A3', 'A2', 'A1', 'A0'] as const;

const flag = z.enum(['true', 'false']).transform((value) => value === 'true');
const list = z
  .string()
  .transform((text) => text.split(',').map((item) => item.trim()))
  .pipe(z.array(z.string()));

/**
 * GET /api/designs/:designId/sheet.svg and sheet.pdf: the saved design's sheet as a file, drawn from the model. `size` is the
 * sheet's own paper unless given, `layers` and `segments` (ids, separated by commas) all of them. Of a design on several sheets
 * `sheet` names the one to draw; without it a PDF has a page for each, and an SVG is of the first.
 */
export const sheetExportQuerySchema = z.strictObject({
  size: z.enum(exportPapers).optional(),
  sheet: z
    .string()
    .regex(/^[1-9]\d?$/, 'expected the number of a sheet, from 1')
    .transform(Number)
    .optional(),
  look: z.enum(exportLooks).default('paper'),
  findings: flag.default(false),
  addresses: flag.default(true),
  layers: list.pipe(z.array(z.enum(exportLayers))).default([...exportLayers]),
  segments: list.optional(),
});
export type SheetExportQuery = z.output<typeof sheetExportQuerySchema>;
