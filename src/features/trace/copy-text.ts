import { showToast } from '../../components/toast.tsx';
import { download } from '../../lib/download.ts';

/** Puts text on the clipboard; a browser that refuses gets it as a file. */
export async function copyText(what: string, text: string, fileName: string): Promise<void> {
  try {
    await navigator.clipboard.writeText(text);
    showToast({ tone: 'done', text: `${what} copied.` });
  } catch {
    download(fileName, new Blob([text], { type: fileName.endsWith('.csv') ? 'text/csv' : 'text/plain' }));
    showToast({
      tone: 'done',
      text: `The browser keeps its clipboard to itself here: saved as ${fileName}.`,
    });
  }
}
