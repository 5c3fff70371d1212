import type { Response } from 'express';
import type { DrawnFile } from '../services/sheet-drawing/export-sheet.ts';

/** Answers with a drawing as a file; where nobody waits for it any more, the work is given up. */
export async function sendDrawing(
  res: Response,
  type: string,
  draw: (signal: AbortSignal) => Promise<DrawnFile>,
): Promise<void> {
  const signal = abortedWith(res);
  try {
    const { file, name } = await draw(signal);
    res.setHeader('Cache-Control', 'private, no-cache');
    res.setHeader('Content-Disposition', `attachment; filename="${name}"`);
    // As a page of its own the drawing may do nothing at all.
    res.setHeader(
      'Content-Security-Policy',
      "default-src 'none'; style-src 'unsafe-inline'; font-src data:; sandbox",
    );
    res.type(type).send(Buffer.from(file));
  } catch (error) {
    // Where nobody waits for the answer any more, none is due.
    if (!signal.aborted) throw error;
  }
}

/** Aborts when the one who asked goes away before the answer is there. */
function abortedWith(res: Response): AbortSignal {
  const controller = new AbortController();
  res.on('close', () => {
    if (!res.writableEnded) controller.abort();
  });
  return controller.signal;
}
