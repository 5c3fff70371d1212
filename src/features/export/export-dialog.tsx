import { useState, type ReactNode } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid, FieldCell, ReadCell } from '../../components/cell.tsx';
import { CheckBox } from '../../components/check-box.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ChoiceCell, SelectCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import { exportLayers, exportPapers } from '../../contract/sheet-exports.ts';
import { useViewChoice } from '../../canvas/use-view-choice.ts';
import { drawSheet } from '../../drawing/sheets/draw-sheet.ts';
import { sheetCount } from '../../drawing/sheets/sheet-numbers.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { currentSheet } from '../../workspace/current-sheet.ts';
import { exportFormats, pngScales, rememberChoice, rememberedChoice } from './export-choice.ts';
import type { ExportChoice } from './export-choice.ts';
import { pngExtent } from './picture-png.ts';
import { screenExtent } from './screen-png.ts';
import { SheetPreview } from './sheet-preview.tsx';
import { paperWords, pixelWords, smallPrint } from './size-words.ts';
import type { SheetChoice } from './use-sheet-export.ts';
import { useChosenPicture, useSheetExport } from './use-sheet-export.ts';

const lookWords: { readonly [look in ExportChoice['look']]: string } = {
  paper: 'Paper',
  slate: 'Slate',
  print: 'Black on white',
  'print-colour': 'Black on white, segments in colour',
};
const layerWords: { readonly [layer in ExportChoice['layers'][number]]: string } = {
  cabling: 'Cabling',
  underlay: 'Underlay',
  overlay: 'Overlay',
};

/** Takes the sheet away as a file: what it is to look like on the left, what it is to be on the right. */
export function ExportDialog({ onClose }: { readonly onClose: () => void }) {
  const { choice: view } = useViewChoice();
  // What is on screen is what one means to take away, until one says otherwise.
  const [kept, setKept] = useState(() => ({
    ...rememberedChoice(localStorage),
    layers: [...view.layers],
  }));
  const [segments, setSegments] = useState(view.segments);
  const [pages, setPages] = useState<'all' | number>(() => (currentSheet() === 1 ? 'all' : currentSheet()));
  const { document } = useChecks();
  const of = sheetCount(document);
  const shownSheet = pages === 'all' ? 1 : Math.min(pages, of);
  // Only a PDF has pages.
  const takesAll = pages === 'all' && kept.format === 'pdf';
  const choice: SheetChoice = { ...kept, segments, sheet: takesAll || of === 1 ? undefined : shownSheet };
  const change = (changed: Partial<ExportChoice>): void => {
    const next = { ...kept, ...changed };
    setKept(next);
    rememberChoice(localStorage, next);
  };
  const { sheet, crowded } = drawSheet(document, shownSheet);
  const picture = useChosenPicture(choice);
  const running = useSheetExport(choice, picture);
  const { format } = choice;
  const paper = choice.paper === 'sheet' ? sheet.size : choice.paper;
  const extent = pngExtent(picture.box, Number(choice.scale));
  const onScreen = format === 'png' && choice.shot === 'screen';
  const fromModel = format !== 'json' && !onScreen;
  const tooLarge = fromModel && format === 'png' && extent.tooLarge;
  const size =
    format === 'png'
      ? pixelWords(extent)
      : [`${paperWords(paper)}, text as text.`, smallPrint(sheet, paper)].filter(Boolean).join(' ');
  const submit = async (): Promise<void> => {
    if (running.doing === undefined && !tooLarge && (await running.start())) onClose();
  };

  return (
    <Dialog
      open
      onOpenChange={onClose}
      title="Export the sheet"
      widthPx={1080}
      onSubmit={() => void submit()}
      footer={
        <>
          <p role="status" className="mr-auto self-center text-base text-ink-2">
            {running.doing === undefined ? '' : `${running.doing}…`}
          </p>
          <Button type="button" onClick={running.doing === undefined ? onClose : running.cancel}>
            {running.doing === undefined ? 'Close' : 'Cancel'}
          </Button>
          <Button type="submit" kind="primary" busy={running.doing !== undefined} disabled={tooLarge}>
            {`Export ${format.toUpperCase()}`}
          </Button>
        </>
      }
    >
      <div className="grid items-start gap-20 md:grid-cols-[minmax(0,1fr)_352px]">
        {fromModel ? (
          <SheetPreview picture={picture} caption={size} />
        ) : onScreen ? (
          <ScreenPreview />
        ) : (
          <Words>
            The design itself: everything that was drawn, numbered and typed, with its layout. Start a new
            design from this file, keep it with your records, or check it with a script.
          </Words>
        )}
        <div>
          <CellGrid columns={2}>
            <ChoiceCell
              label="Format"
              span={2}
              value={format}
              options={exportFormats.map((value) => ({ value, label: value.toUpperCase() }))}
              onChange={(value) => change({ format: value })}
            />
            {format === 'png' && (
              <>
                <ChoiceCell
                  label="Picture"
                  span={2}
                  value={choice.shot}
                  options={[
                    { value: 'sheet', label: 'Whole sheet' },
                    { value: 'screen', label: 'As on screen' },
                  ]}
                  onChange={(shot) => change({ shot })}
                />
                <ChoiceCell
                  label="Scale"
                  span={2}
                  value={choice.scale}
                  options={pngScales.map((value) => ({ value, label: `${value}×` }))}
                  onChange={(scale) => change({ scale })}
                  {...(tooLarge
                    ? {
                        error: `Scale ${choice.scale}× makes ${size}, more than browsers can draw. Choose a smaller one, or PDF.`,
                      }
                    : {})}
                />
              </>
            )}
            {fromModel && (
              <>
                <SelectCell
                  label="Look"
                  span={2}
                  value={choice.look}
                  options={Object.entries(lookWords).map(([value, label]) => ({
                    value: value as ExportChoice['look'],
                    label,
                  }))}
                  onChange={(look) => change({ look })}
                />
                {of > 1 && (
                  <SelectCell
                    label="Sheet"
                    span={2}
                    value={takesAll ? 'all' : String(shownSheet)}
                    options={[
                      ...(format === 'pdf' ? [{ value: 'all', label: `All ${of}, a page each` }] : []),
                      ...Array.from({ length: of }, (_, i) => ({
                        value: String(i + 1),
                        label: `Sheet ${i + 1} of ${of}`,
                      })),
                    ]}
                    onChange={(value) => setPages(value === 'all' ? 'all' : Number(value))}
                  />
                )}
                {format !== 'png' && (
                  <SelectCell
                    label="Sheet size"
                    span={2}
                    value={choice.paper}
                    options={[
                      { value: 'sheet' as const, label: `As drawn, ${sheet.size}` },
                      ...exportPapers.map((value) => ({ value, label: paperWords(value) })),
                    ]}
                    onChange={(value) => change({ paper: value })}
                  />
                )}
                <Ticks
                  label="Shows"
                  options={[
                    { id: 'findings', words: 'Findings' },
                    { id: 'addresses', words: 'Addresses' },
                  ]}
                  ticked={[
                    ...(choice.findings ? ['findings'] : []),
                    ...(choice.addresses ? ['addresses'] : []),
                  ]}
                  onChange={(ticked) =>
                    change({
                      findings: ticked.includes('findings'),
                      addresses: ticked.includes('addresses'),
                    })
                  }
                />
                <Ticks
                  label="Layers"
                  options={exportLayers.map((layer) => ({ id: layer, words: layerWords[layer] }))}
                  ticked={choice.layers}
                  atLeastOne
                  onChange={(ticked) =>
                    change({ layers: exportLayers.filter((layer) => ticked.includes(layer)) })
                  }
                />
                <SegmentTicks segments={segments} onChange={setSegments} />
              </>
            )}
            <ReadCell label="File" span={2}>
              {running.fileName}
            </ReadCell>
          </CellGrid>
          {fromModel && crowded.some(({ what }) => what === 'sheet') && (
            <p className="mt-10 text-note text-degr">
              Some sites lie outside the largest sheet and are cut off. Tidy the sheet, or collapse sites.
            </p>
          )}
          {running.failure !== undefined && <ErrorNotice className="mt-12">{running.failure}</ErrorNotice>}
        </div>
      </div>
    </Dialog>
  );
}

function Words({ children }: { readonly children: ReactNode }) {
  return <p className="border border-rule-2 bg-raise p-16 text-base text-ink-2">{children}</p>;
}

function ScreenPreview() {
  return (
    <Words>
      The part of the sheet that is on screen now, {pixelWords(screenExtent(1))} at 1×, as it is seen:
      selection, trace, load and whatever else is shown on it. Move the sheet and choose its results before
      you export.
    </Words>
  );
}

interface TicksProps {
  readonly label: string;
  readonly options: readonly { readonly id: string; readonly words: ReactNode }[];
  readonly ticked: readonly string[];
  readonly onChange: (ticked: readonly string[]) => void;
  /** The last tick stays. */
  readonly atLeastOne?: boolean;
}

/** A cell of boxes to tick, side by side. */
function Ticks({ label, options, ticked, onChange, atLeastOne = false }: TicksProps) {
  return (
    <FieldCell label={label} span={2} group>
      {() => (
        <span className="flex max-h-120 flex-1 flex-wrap gap-x-16 gap-y-6 overflow-y-auto py-3">
          {options.map(({ id, words }) => (
            <CheckBox
              key={id}
              checked={ticked.includes(id)}
              disabled={atLeastOne && ticked.length === 1 && ticked.includes(id)}
              onChange={({ target }) =>
                onChange(target.checked ? [...ticked, id] : ticked.filter((other) => other !== id))
              }
            >
              {words}
            </CheckBox>
          ))}
        </span>
      )}
    </FieldCell>
  );
}

/** Which segments' tunnels are drawn; nothing to choose while there is one. */
function SegmentTicks({
  segments,
  onChange,
}: {
  readonly segments: readonly string[] | undefined;
  readonly onChange: (segments: readonly string[] | undefined) => void;
}) {
  const { document } = useChecks();
  const all = Object.entries(document.segments).sort(
    ([, a], [, b]) => a.letter.length - b.letter.length || (a.letter < b.letter ? -1 : 1),
  );
  if (all.length < 2) return null;
  return (
    <Ticks
      label="Segments"
      options={all.map(([id, { letter, name }]) => ({
        id,
        words: (
          <span className="inline-flex items-center gap-6">
            <SegmentSwatch letter={letter} cordPx={14} />
            {name}
          </span>
        ),
      }))}
      ticked={segments ?? all.map(([id]) => id)}
      atLeastOne
      onChange={(ticked) => onChange(ticked.length === all.length ? undefined : ticked)}
    />
  );
}
