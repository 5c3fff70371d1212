import type { Decorations } from '#drawing/decorations.ts';
import { noDecorations } from '#drawing/decorations.ts';
import { thumbnailSvgText } from '#drawing/svg/thumbnail-svg.ts';
import type { Design } from '#engine/model/design.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { Finding } from '#engine/rules/finding.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { thumbnailThemes } from '#contract/designs.ts';
import { authorise } from '../auth/authorise.ts';
import type { CheckFacts } from './check-facts.ts';
import { checkFactsOf, findingsBy } from './check-facts.ts';
import type { Context } from './context.ts';
import { requireDesign } from './designs.ts';
import { loadDocument } from './stored-documents.ts';

export type ThumbnailTheme = (typeof thumbnailThemes)[number];

/** Pictures that this process drew last, by design, sequence number and theme. */
export interface ThumbnailCache {
  find(key: string): string | undefined;
  keep(key: string, svg: string): void;
}

const cachedThumbnails = 200;

export function createThumbnailCache(): ThumbnailCache {
  // A Map keeps the order of insertion: its first key is the oldest.
  const svgs = new Map<string, string>();
  return {
    find: (key) => svgs.get(key),
    keep(key, svg) {
      svgs.set(key, svg);
      const oldest = svgs.keys().next().value;
      if (svgs.size > cachedThumbnails && oldest !== undefined) svgs.delete(oldest);
    },
  };
}

/** A small picture of a design as it is now, and which sequence number that is. */
export async function readThumbnail(
  context: Context,
  personId: string,
  designId: string,
  theme: ThumbnailTheme,
): Promise<{ readonly sequence: number; readonly svg: string }> {
  const { knex } = context.database;
  const design = await requireDesign(context, designId);
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  const { sequence } = design;
  const facts = await checkFactsOf(context, knex, design);
  const waived = facts.waivers.map(({ id, expiresOn }) => (expiresOn < facts.today ? '' : id)).join(' ');
  const key = `${designId} ${sequence} ${theme} ${waived}`;
  const known = context.thumbnails.find(key);
  if (known !== undefined) return { sequence, svg: known };
  const { document } = await loadDocument(context, knex, design);
  const svg = drawThumbnail(document, theme, facts);
  context.thumbnails.keep(key, svg);
  return { sequence, svg };
}

function drawThumbnail(document: Design, theme: ThumbnailTheme, facts: CheckFacts): string {
  const { covered } = findingsBy(document, facts);
  return thumbnailSvgText(document, {
    theme,
    tunnelSegments: tunnelSegments(indexNetwork(document)),
    decorations: decorationsOf(
      runRules(document, facts.numbering),
      new Set(covered.map(({ finding }) => finding.key)),
    ),
  });
}

/** What a picture of this size can show of findings: where they are, and which cords are cut. */
function decorationsOf(findings: readonly Finding[], waived: ReadonlySet<string>): Decorations {
  return {
    ...noDecorations,
    cuts: findings.flatMap(({ mark }) =>
      mark?.kind === 'cut'
        ? [{ tunnel: mark.tunnel, ...(mark.vnis === undefined ? {} : { vnis: mark.vnis }) }]
        : [],
    ),
    balloons: findings.flatMap(({ key, severity, elements: [at] }, index) =>
      at === undefined ? [] : [{ number: index + 1, severity, waived: waived.has(key), at }],
    ),
  };
}
