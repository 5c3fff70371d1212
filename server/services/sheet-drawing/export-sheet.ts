import type { SheetExportQuery } from '#contract/sheet-exports.ts';
import { fileNameOf } from '#drawing/picture/file-name.ts';
import type { Design } from '#engine/model/design.ts';
import { authorise } from '../../auth/authorise.ts';
import { sheetCount } from '#drawing/sheets/sheet-numbers.ts';
import { Refusal } from '../../errors.ts';
import { checkFactsOf } from '../check-facts.ts';
import type { Context } from '../context.ts';
import { requireDesign } from '../designs.ts';
import { loadIssued, openRevision } from '../revisions.ts';
import { loadDocument } from '../stored-documents.ts';
import { createSheetDrawer } from './sheet-drawer.ts';
import type { SheetJob } from './sheet-job.ts';

// One thread for the whole process, whoever asks.
const drawer = createSheetDrawer();

/** A file that was drawn, with a name for it. */
export interface DrawnFile {
  readonly file: Uint8Array;
  readonly name: string;
}

export interface Wanted {
  readonly format: 'svg' | 'pdf';
  readonly query: SheetExportQuery;
  /** Aborts when nobody waits for the file any more. */
  readonly signal: AbortSignal;
}

/** The saved design's sheet. */
export async function exportSheet(
  context: Context,
  personId: string,
  designId: string,
  wanted: Wanted,
): Promise<DrawnFile> {
  const { knex } = context.database;
  const design = await requireDesign(context, designId);
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  const { document } = await loadDocument(context, knex, design);
  return draw(context, document, wanted, async () => {
    const { numbering, waivers, today } = await checkFactsOf(context, knex, design);
    return { from: { numbering }, waivers, today };
  });
}

/** A revision's sheet: the document, the findings and the waivers that were frozen, under the title block of its state. */
export async function exportRevision(
  context: Context,
  personId: string,
  revisionId: string,
  wanted: Wanted,
): Promise<DrawnFile> {
  const { knex } = context.database;
  const { revision } = await openRevision(knex, personId, revisionId, 'revision.read');
  return drawIssued(context, await loadIssued(knex, revision), wanted);
}

/** The sheet of what was frozen. */
export function drawIssued(
  context: Context,
  { document, findings, waivers }: Awaited<ReturnType<typeof loadIssued>>,
  wanted: Wanted,
): Promise<DrawnFile> {
  // No day is past for what held when it was frozen.
  return draw(context, document, wanted, () => Promise.resolve({ from: { findings }, waivers, today: '' }));
}

async function draw(
  context: Context,
  document: Design,
  { format, query, signal }: Wanted,
  checksOf: () => Promise<NonNullable<SheetJob['checks']>>,
): Promise<DrawnFile> {
  refuseUnknownSegments(document, query.segments);
  refuseUnknownSheet(document, query.sheet);
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
      ...(query.sheet === undefined ? {} : { sheet: query.sheet }),
      ...(query.findings ? { checks: await checksOf() } : {}),
      drawnAt: context.clock(),
    },
    signal,
  );
  return { file, name: fileNameOf(document, format, sheetCount(document) === 1 ? undefined : query.sheet) };
}

function refuseUnknownSheet(document: Design, asked: number | undefined): void {
  const of = sheetCount(document);
  if (asked === undefined || asked <= of) return;
  const expected = of === 1 ? 'expected 1: the design has one sheet' : `expected a number from 1 to ${of}`;
  throw new Refusal('invalid-request', `'sheet' is ${asked}: ${expected}.`, {
    details: [{ path: 'sheet', value: JSON.stringify(String(asked)), expected }],
  });
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
