import { z } from 'zod';
import { exportLayers, exportLooks, exportPapers } from '../../contract/sheet-exports.ts';

export const exportFormats = ['png', 'svg', 'pdf', 'json'] as const;
export type ExportFormat = (typeof exportFormats)[number];
/** Pixels of the picture per pixel of the sheet, as the choice writes them. */
export const pngScales = ['1', '2', '3', '4'] as const;

const choiceSchema = z.object({
  format: z.enum(exportFormats),
  look: z.enum(exportLooks),
  /** Of a PNG: the sheet drawn from the model, or what is on screen with everything that is shown there. */
  shot: z.enum(['sheet', 'screen']),
  scale: z.enum(pngScales),
  /** `sheet`: as large as the sheet is drawn. */
  paper: z.enum(['sheet', ...exportPapers]),
  findings: z.boolean(),
  addresses: z.boolean(),
  layers: z.array(z.enum(exportLayers)).min(1),
});
/** What a person chose last; segments belong to one design and are chosen anew. */
export type ExportChoice = z.infer<typeof choiceSchema>;

export const firstChoice: ExportChoice = {
  format: 'pdf',
  look: 'paper',
  shot: 'sheet',
  scale: '2',
  paper: 'sheet',
  findings: false,
  addresses: true,
  layers: [...exportLayers],
};

const key = 'longpatch.export';

/** The choice that this browser remembers; the first one where it remembers none that can be used. */
export const rememberedChoice = (storage: Pick<Storage, 'getItem'>): ExportChoice => {
  try {
    const read = choiceSchema.safeParse(JSON.parse(storage.getItem(key) ?? 'null'));
    return read.success ? read.data : firstChoice;
  } catch {
    return firstChoice;
  }
};

export const rememberChoice = (storage: Pick<Storage, 'setItem'>, choice: ExportChoice): void => {
  try {
    storage.setItem(key, JSON.stringify(choice));
  } catch {
    // A browser that keeps nothing still exports.
  }
};
