import type { ElkNode } from 'elkjs/lib/elk-api.js';
import type { ElkGraph } from '../drawing/tidy/elk-graph.ts';
import { elkGraphOf, positionsFromElk, selectionGraph, unusualSites } from '../drawing/tidy/elk-graph.ts';
import { drawSheet } from '../drawing/sheets/draw-sheet.ts';
import { sheetOfSite } from '../drawing/sheets/sheet-numbers.ts';
import type { SiteLayout } from '../drawing/tidy/site-layout.ts';
import { tidySite } from '../drawing/tidy/tidy-site.ts';
import { tidySelection } from '../drawing/tidy/tidy-selection.ts';
import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { tidyHere, type TidyWhole } from './tidy-in-worker.ts';

/** Lays out one graph; the browser does it in a worker. */
export type LayOut = (graph: ElkNode) => Promise<ElkNode>;

// Of elkjs's answer only the children's places are read.
const asAnswer = (answer: ElkNode): Pick<ElkGraph, 'children'> => ({
  children: (answer.children ?? []) as ElkGraph['children'],
});

/** A new layout of the whole sheet. Sites that none of the drawing's own templates fits are laid out by `layOut`. */
export const tidySheet = async (
  design: Design,
  layOut: LayOut,
  tidyWhole: TidyWhole = tidyHere,
  signal?: AbortSignal,
): Promise<MergePatch> => {
  const laidOut = await Promise.all(
    unusualSites(design).map(async (site): Promise<readonly [string, SiteLayout]> => [
      site.id,
      positionsFromElk(site, asAnswer(await layOut(elkGraphOf(site) as ElkNode))),
    ]),
  );
  return tidyWhole(design, { siteLayouts: Object.fromEntries(laidOut) }, signal);
};

/** A new layout of some devices, where they stand together; locked ones stay. */
export const tidyDevices = async (
  design: Design,
  devices: readonly string[],
  layOut: LayOut,
): Promise<MergePatch> => {
  const graph = elkGraphOf(selectionGraph(design, devices));
  return tidySelection(design, devices, asAnswer(await layOut(graph as ElkNode)));
};

/** A new layout of one site where it stands. */
export const tidyOneSite = async (design: Design, site: string, layOut: LayOut): Promise<MergePatch> => {
  const unusual = unusualSites(design).find(({ id }) => id === site);
  const given =
    unusual === undefined
      ? undefined
      : positionsFromElk(unusual, asAnswer(await layOut(elkGraphOf(unusual) as ElkNode)));
  return tidySite(design, drawSheet(design, sheetOfSite(design.layout, site)), site, given);
};
