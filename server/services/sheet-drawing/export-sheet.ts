import type { SheetExportQuery } from '#contract/sheet-exports.ts';
import { fileNameOf } from '#drawing/picture/file-name.ts';
import type { Design } from '#engine/model/design.ts';
import { authorise } from '../../auth/authorise.ts';
import { Refusal } from '../../errors.ts';
import { checkFactsOf } from '../check-facts.ts';
import type { Context } from '../context.ts';
import { requireDesign } from '../designs.ts';
import { loadDocument } from '../stored-documents.ts';
import { createSheetDrawer } from './sheet-drawer.ts';

// One thread for the whole process, whoever asks.
const drawer = createSheetDrawer();

/** The saved design's sheet as a file, with a name for it. */
export async function exportSheet(
  context: Context,
  personId: string,
  designId: string,
  format: 'svg' | 'pdf',
  query: SheetExportQuery,
  signal: AbortSignal,
): Promise<{ readonly file: Uint8Array; readonly name: string }> {
  const { knex } = context.database;
  const design = await requireDesign(context, designId);
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  const { document } = await loadDocument(context, knex, design);
  refuseUnknownSegments(document, query.segments);
  const checks = query.findings ? await checkFactsOf(context, knex, design) : undefined;
  const file = await drawer.draw(
    {
      format,
      document,
      look: query.look,
      view: {
        layers: query.layers,
        ...(query.segments === undefined ? {} : { segments: query.segments }),
      },
      addresses: query.addresses,
      ...(query.size === undefined ? {} : { paper: query.size }),
      ...(checks === undefined ? {} : { checks }),
      drawnAt: context.clock(),
    },
    signal,
  );
  return { file, name: fileNameOf(document, format) };
}

function refuseUnknownSegments({ segments }: Design, asked: readonly string[] = []): void {
  const unknown = asked.find((id) => !Object.hasOwn(segments, id));
  if (unknown === undefined) return;
  const known = Object.keys(segments).slice(0, 8).join(', ');
  const expected =
    known === ''
      ? 'expected none: the design has no segments'
      : `expected ids of the design’s segments, such as ${known}`;
  throw new Refusal('invalid-request', `'segments' is "${unknown}": ${expected}.`, {
    details: [{ path: 'segments', value: JSON.stringify(unknown), expected }],
  });
}
