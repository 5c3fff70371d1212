import type { Design } from '../../engine/model/design.ts';

/** A name for a file of a design, or of one sheet of it: its number and title, in letters that every system takes. */
export const fileNameOf = ({ meta }: Pick<Design, 'meta'>, ending: string, sheet?: number): string => {
  const base = [meta.identification, meta.title]
    .filter(Boolean)
    .join(' ')
    // Accents go, their letters stay.
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/[^A-Za-z0-9]+/g, '-')
    .replace(/^-|-$/g, '')
    .toLowerCase()
    .slice(0, 120);
  const part = sheet === undefined ? '' : `-sheet-${sheet}`;
  return `${base || 'sheet'}${part}.${ending}`;
};
