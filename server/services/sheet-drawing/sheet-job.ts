import type { Decorations } from '#drawing/decorations.ts';
import { findingsToDecorations } from '#drawing/findings-to-decorations.ts';
import type { PaperName } from '#drawing/picture/paper-sizes.ts';
import { pictureSvgText } from '#drawing/picture/picture-svg.ts';
import type { SheetPicture } from '#drawing/picture/sheet-picture.ts';
import { sheetPicture } from '#drawing/picture/sheet-picture.ts';
import { sheetCount } from '#drawing/sheets/sheet-numbers.ts';
import type { Theme } from '#drawing/theme/tokens.ts';
import type { ViewChoice } from '#drawing/view-layers.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { tunnelStates } from '#engine/network/can-come-up.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { NumberingContext } from '#engine/numbering/numbering-context.ts';
import type { Finding } from '#engine/rules/finding.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { WaiverTerms } from '#engine/rules/waived.ts';
import { applyWaivers } from '#engine/rules/waived.ts';
import { picturePdf } from './picture-pdf.ts';
import { embeddedFaces } from './work-sans.ts';

/** One drawing to make, as plain data that a thread can be sent. */
export interface SheetJob {
  readonly format: 'svg' | 'pdf';
  readonly document: Design;
  readonly look: Theme;
  readonly view: ViewChoice;
  readonly addresses: boolean;
  /** The sheet to draw; absent: all pages of a PDF, the first as SVG. */
  readonly sheet?: number;
  /** Absent: the sheet's own. */
  readonly paper?: PaperName;
  /** Absent: a drawing without findings. */
  readonly checks?: {
    /** What is known beyond the document, or what was found when it was frozen. */
    readonly from: { readonly numbering: NumberingContext } | { readonly findings: readonly Finding[] };
    readonly waivers: readonly WaiverTerms[];
    readonly today: string;
  };
  readonly drawnAt: Date;
}

function decorationsOf(document: Design, checks: NonNullable<SheetJob['checks']>): Decorations {
  const { from } = checks;
  const findings = 'findings' in from ? from.findings : runRules(document, from.numbering);
  const { covered } = applyWaivers(findings, checks.waivers, checks.today);
  const waived = new Set(covered.map(({ finding }) => finding.key));
  const down = [...tunnelStates(indexNetwork(document))].filter(([, state]) => !state.up).map(([id]) => id);
  return findingsToDecorations(findings, down, undefined, (key) => waived.has(key));
}

/** Makes one drawing: routing, checks where findings are wanted, and the file. */
export async function drawSheet(job: SheetJob): Promise<Uint8Array> {
  const { document, checks } = job;
  const options = {
    look: job.look,
    tunnelSegments: tunnelSegments(indexNetwork(document)),
    view: job.view,
    addresses: job.addresses,
    ...(checks === undefined ? {} : { decorations: decorationsOf(document, checks) }),
  };
  const pictureOf = (number: number): SheetPicture => sheetPicture(document, { ...options, number });
  const picture = pictureOf(job.sheet ?? 1);
  const paper = job.paper ?? picture.sheet;
  if (job.format === 'svg') {
    const plain = pictureSvgText(picture, { paper });
    return new TextEncoder().encode(pictureSvgText(picture, { paper, fonts: embeddedFaces(plain) }));
  }
  const { createdBy, identification, revision } = document.meta;
  const further =
    job.sheet === undefined
      ? Array.from({ length: sheetCount(document) - 1 }, (_, i) => pictureOf(i + 2))
      : [];
  return picturePdf([picture, ...further], {
    title: further.length === 0 ? picture.title : document.meta.title,
    paper,
    author: createdBy,
    subject: [identification, revision === undefined ? undefined : `Rev. ${revision}`]
      .filter(Boolean)
      .join(', '),
    drawnAt: job.drawnAt,
  });
}
