import { download } from '../lib/download.ts';
import { showToast } from './toast.tsx';

const fileNameOf = (caption: string): string =>
  `${caption
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '')}.csv`;

/** Puts a table on the clipboard; a browser that refuses gets it as a file. Says which. */
export const copyCsv = async (caption: string, text: string, rowCount: number): Promise<void> => {
  const rows = rowCount === 1 ? '1 row' : `${rowCount} rows`;
  try {
    await navigator.clipboard.writeText(text);
    showToast({ tone: 'done', text: `${rows} copied as CSV.` });
  } catch {
    const name = fileNameOf(caption);
    download(name, new Blob([text], { type: 'text/csv' }));
    showToast({
      tone: 'done',
      text: `The browser keeps its clipboard to itself here: ${rows} saved as ${name}.`,
    });
  }
};
