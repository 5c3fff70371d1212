/** What a chosen file holds: a document to send, or why it is none. */
export type DesignFile =
  | { readonly ok: true; readonly name: string; readonly document: unknown; readonly title: string | null }
  | { readonly ok: false; readonly problem: string };

/** Reads a design's own file. Whether its content is a design is the engine's to say; that it is JSON is said here. */
export async function readDesignFile(file: File): Promise<DesignFile> {
  const text = await file.text();
  if (text.trim() === '') {
    return { ok: false, problem: `${file.name} is empty. Choose a file that was exported from a design.` };
  }
  try {
    const document: unknown = JSON.parse(text);
    return { ok: true, name: file.name, document, title: titleOf(document) };
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    return {
      ok: false,
      problem: `${file.name} is not JSON (${reason}). Choose a file that was exported from a design.`,
    };
  }
}

function titleOf(document: unknown): string | null {
  if (!isRecord(document) || !isRecord(document['meta'])) return null;
  const title = document['meta']['title'];
  return typeof title === 'string' && title.trim() !== '' ? title.trim() : null;
}

const isRecord = (value: unknown): value is Readonly<Record<string, unknown>> =>
  typeof value === 'object' && value !== null;
