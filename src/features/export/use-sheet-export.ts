import { useDeferredValue, useEffect, useMemo, useRef, useState } from 'react';
import type { Decorations } from '../../drawing/decorations.ts';
import { findingsToDecorations } from '../../drawing/findings-to-decorations.ts';
import { fileNameOf } from '../../drawing/picture/file-name.ts';
import { pictureSvgText } from '../../drawing/picture/picture-svg.ts';
import type { SheetPicture } from '../../drawing/picture/sheet-picture.ts';
import { sheetPicture } from '../../drawing/picture/sheet-picture.ts';
import { sheetCount } from '../../drawing/sheets/sheet-numbers.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Design } from '../../engine/model/design.ts';
import { tunnelStates } from '../../engine/network/can-come-up.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { fetchFile } from '../../lib/api-client.ts';
import { asApiError } from '../../lib/api-error.ts';
import { download } from '../../lib/download.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { browserFaces } from './browser-faces.ts';
import type { ExportChoice } from './export-choice.ts';
import { pictureSvgToPng, pngExtent } from './picture-png.ts';
import { screenPng } from './screen-png.ts';

/** A choice with what belongs to this design alone. */
export interface SheetChoice extends ExportChoice {
  /** Absent: all segments. */
  readonly segments: readonly string[] | undefined;
  /** The sheet to draw of several; absent: all of them, of which a picture shows the first. */
  readonly sheet: number | undefined;
}

function useFound(): Decorations {
  const { findings, document, waiverOf } = useChecks();
  return useMemo(() => {
    const down = [...tunnelStates(indexNetwork(document))].filter(([, state]) => !state.up).map(([id]) => id);
    return findingsToDecorations(findings, down, undefined, (key) => waiverOf(key) !== undefined);
  }, [findings, document, waiverOf]);
}

/** The sheet as the choice would let it leave. */
export function useChosenPicture(choice: SheetChoice): SheetPicture {
  const { document } = useChecks();
  const found = useFound();
  const { look, findings, addresses, layers, segments, sheet } = useDeferredValue(choice);
  return useMemo(
    () =>
      sheetPicture(document, {
        look,
        number: Math.min(sheet ?? 1, sheetCount(document)),
        tunnelSegments: tunnelSegments(indexNetwork(document)),
        view: { layers, ...(segments === undefined ? {} : { segments }) },
        addresses,
        ...(findings ? { decorations: found } : {}),
      }),
    [document, found, look, findings, addresses, layers, segments, sheet],
  );
}

const designText = (design: Design): string => `${JSON.stringify(design, null, 2)}\n`;

const exportQuery = ({ look, paper, findings, addresses, layers, segments, sheet }: SheetChoice): string => {
  const query = new URLSearchParams({
    look,
    findings: String(findings),
    addresses: String(addresses),
    layers: layers.join(','),
  });
  if (sheet !== undefined) query.set('sheet', String(sheet));
  if (paper !== 'sheet') query.set('size', paper);
  if (segments !== undefined) query.set('segments', segments.join(','));
  return query.toString();
};

const whenAborted = (signal: AbortSignal): Promise<never> =>
  new Promise((_, reject) => signal.addEventListener('abort', () => reject(signal.reason as Error)));

export interface SheetExport {
  /** What is being done just now, in words. */
  readonly doing: string | undefined;
  readonly failure: string | undefined;
  readonly fileName: string;
  /** Makes the file and hands it over; answers whether it did. */
  readonly start: () => Promise<boolean>;
  readonly cancel: () => void;
}

/** Makes the chosen file and hands it to the person; one at a time, and it can be cancelled. */
export function useSheetExport(choice: SheetChoice, picture: SheetPicture): SheetExport {
  const open = useOpenDesign();
  const { designId, sheetPath = `/api/designs/${encodeURIComponent(designId)}/sheet` } = useDesignPlace();
  const meta = useOpenState((state) => state.document.meta);
  const [doing, setDoing] = useState<string>();
  const [failure, setFailure] = useState<string>();
  const running = useRef<AbortController>(undefined);
  useEffect(() => () => running.current?.abort(), []);
  const isOneOfSeveral = useOpenState(({ document }) => sheetCount(document) > 1);
  const isDrawn = choice.format !== 'json' && (choice.format !== 'png' || choice.shot === 'sheet');
  const fileName = fileNameOf({ meta }, choice.format, isOneOfSeveral && isDrawn ? choice.sheet : undefined);

  const svgText = async (paper: ExportChoice['paper']): Promise<string> => {
    const fonts = await browserFaces(pictureSvgText(picture));
    return pictureSvgText(picture, { fonts, ...(paper === 'sheet' ? {} : { paper }) });
  };

  const pdf = async (signal: AbortSignal): Promise<Blob> => {
    setDoing('Saving your last edits');
    await open.flush();
    signal.throwIfAborted();
    if (open.store.getState().save.kind !== 'saved')
      throw new Error(
        'The PDF is drawn by the server from what is saved, and your last edits are not. Wait until the bar says Saved, or export as SVG.',
      );
    setDoing('Drawing the PDF');
    return fetchFile(`${sheetPath}.pdf?${exportQuery(choice)}`, signal);
  };

  const make = async (signal: AbortSignal): Promise<Blob> => {
    switch (choice.format) {
      case 'json':
        return new Blob([designText(open.store.getState().document)], { type: 'application/json' });
      case 'svg':
        return new Blob([await svgText(choice.paper)], { type: 'image/svg+xml' });
      case 'png':
        if (choice.shot === 'screen') return screenPng(Number(choice.scale), signal);
        return pictureSvgToPng(await svgText('sheet'), pngExtent(picture.box, Number(choice.scale)), signal);
      case 'pdf':
        return pdf(signal);
    }
  };

  const start = async (): Promise<boolean> => {
    const controller = new AbortController();
    running.current = controller;
    setFailure(undefined);
    setDoing(`Drawing the ${choice.format.toUpperCase()}`);
    try {
      // What can't be stopped half way goes on unheard.
      const blob = await Promise.race([make(controller.signal), whenAborted(controller.signal)]);
      download(fileName, blob);
      return true;
    } catch (error) {
      if (!controller.signal.aborted) setFailure(asApiError(error).message);
      return false;
    } finally {
      setDoing(undefined);
    }
  };

  return { doing, failure, fileName, start, cancel: () => running.current?.abort() };
}
