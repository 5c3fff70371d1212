import { useEffect, useEffectEvent, useMemo, useState } from 'react';
import { setInspecting } from '../../canvas/desk-state.ts';
import type { DeskTab } from '../../canvas/desk-tab.ts';
import { useDrawn } from '../../canvas/geometry-context.tsx';
import { useShowAll } from '../../canvas/use-show-all.ts';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { showToast } from '../../components/toast.tsx';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Finding } from '../../engine/rules/finding.ts';
import { useMedia } from '../../lib/use-media.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import {
  readQuestion,
  textsIn,
  variedName,
  variedTexts,
  writeQuestion,
  writeVariation,
  type AddressTexts,
} from './trace-address.ts';
import { traceToDecorations } from './trace-decorations.ts';
import { TraceFigures } from './trace-figures.tsx';
import { TraceForm, type PickEnd } from './trace-form.tsx';
import { TracePanel, type TracedProbe, type Which } from './trace-panel.tsx';
import { pickedEnd } from './trace-places.ts';
import { questionFields, type TraceQuestion } from './trace-question.ts';
import { answerQuestion, type TraceResult } from './trace-result.ts';
import { traceStarts } from './trace-starts.ts';
import { waysName } from './trace-words.ts';
import { usePlayback } from './use-playback.ts';
import './trace.css';

const tab = { value: 'trace', label: 'Frame trace', usualHeightPx: 318 } as const;
const comparedHeightPx = 400;

/** On how many stages the lamp goes over a sheet when there are more hops: each draws the whole sheet anew. */
const mostStages = 24;

const traced = (
  design: Design,
  findings: readonly Finding[],
  texts: AddressTexts | undefined,
): TracedProbe | undefined => {
  if (texts === undefined) return undefined;
  const { question, problems } = readQuestion(design, texts);
  if (problems.length > 0) return { question, problems, result: undefined };
  const answer = answerQuestion(design, findings, question);
  return {
    question,
    problems: answer?.ok === false ? answer.problems : [],
    result: answer?.ok === true ? answer.result : undefined,
  };
};

/** What the second probe differs in until somebody chooses: DF where there is one, else its length. */
const usualVariation = ({ question, result }: TracedProbe): TraceQuestion => {
  const packet = result?.probe.packet;
  if (packet?.kind !== 'ip') return { ...question, bytes: 1518 };
  if (packet.version === 'ipv4') return { ...question, dontFragment: packet.dontFragment !== true };
  const largest = result?.fits?.largestBytes;
  return { ...question, bytes: largest === packet.packetBytes ? largest + 1 : (largest ?? 1500) };
};

/** The drawer's Frame trace: its panel, the form beside the sheet, and what it lights up on the sheet. */
export function useTraceTab(
  active: boolean,
  { onShowFinding }: { readonly onShowFinding: (key: string) => void },
): DeskTab {
  const { document: design, findings, behind } = useChecks();
  const open = useOpenDesign();
  const { valueOf, change } = useSearchValues();
  const { settled } = useDrawn();
  const showAll = useShowAll();
  const isStacked = useMedia('(max-width: 767px)');
  const [picking, setPicking] = useState<PickEnd>();
  const [which, setWhich] = useState<Which>('first');

  const texts = active ? JSON.stringify([textsIn(valueOf), variedTexts(valueOf) ?? null]) : '';
  const [first, second] = useMemo(() => {
    if (texts === '') return [undefined, undefined];
    const [own, varied] = JSON.parse(texts) as [AddressTexts, AddressTexts | null];
    return [traced(design, findings, own), traced(design, findings, varied ?? undefined)];
  }, [texts, design, findings]);
  const shown: Which = which === 'second' && second !== undefined ? 'second' : 'first';
  const result: TraceResult | undefined = (shown === 'second' ? second : first)?.result;
  const count = Math.max(first?.result?.hops.length ?? 0, second?.result?.hops.length ?? 0);
  // A new version of the design is no new trace: what was played stays played.
  const playback = usePlayback(texts, count);

  const stage = Math.ceil(count / mostStages);
  const passed = playback.at >= count ? count : Math.floor(playback.at / Math.max(1, stage)) * stage;
  const decorations = useMemo(
    () =>
      result === undefined
        ? undefined
        : traceToDecorations(
            design,
            result.trace,
            result.hops.slice(0, passed),
            passed >= result.hops.length,
          ),
    [design, result, passed],
  );

  const put = (of: Which, question: TraceQuestion): void => {
    if (of === 'second') {
      if (first !== undefined) change(writeVariation(first.question, question));
      return;
    }
    // The second says only what is different: what no longer is, goes.
    const own = writeQuestion(question);
    const same = questionFields.filter((field) => valueOf(variedName(field)) === own[field]);
    change({ ...own, ...Object.fromEntries(same.map((field) => [variedName(field), ''])) });
  };

  useEffect(() => {
    if (active) setInspecting(true);
  }, [active]);
  const begin = useEffectEvent(() => {
    // What is selected is where somebody wants to trace from; the form then takes the inspector's place.
    const [ref] = open.store.getState().selection;
    if (ref === undefined) return;
    const picked = pickedEnd(design, ref, 'from');
    if (picked.ok && first?.question.from === undefined && first !== undefined)
      put('first', { ...first.question, from: picked.source });
    open.select([]);
  });
  useEffect(() => {
    if (active) begin();
  }, [active]);

  const pan = useEffectEvent(() => {
    if (result === undefined) return;
    const refs = result.hops.flatMap(({ lit, at }) => [at, ...lit]).filter(isOnPath);
    showAll(refs.flatMap((ref) => anchorOf(settled, ref) ?? []));
  });
  useEffect(() => {
    // After the drawer has taken its room from the sheet.
    if (!active || texts === '') return;
    const timer = setTimeout(pan, 200);
    return () => clearTimeout(timer);
  }, [active, texts, shown]);

  const endPicking = useEffectEvent((event: KeyboardEvent) => {
    if (event.key === 'Escape') setPicking(undefined);
  });
  useEffect(() => {
    if (picking === undefined) return;
    const onKey = (event: KeyboardEvent): void => endPicking(event);
    document.addEventListener('keydown', onKey);
    return () => document.removeEventListener('keydown', onKey);
  }, [picking]);

  if (!active || first === undefined) return { ...tab, panel: null };

  const edited = shown === 'second' && second !== undefined ? second : first;
  const onPick = (ref: ElementRef): void => {
    if (picking === undefined) return;
    const picked = pickedEnd(design, ref, picking);
    if (!picked.ok) return void showToast({ tone: 'failed', text: picked.why });
    setPicking(undefined);
    if (picking === 'from') put(shown, { ...edited.question, from: picked.source });
    else if ('host' in picked.source) put(shown, { ...edited.question, to: picked.source.host });
  };
  const side = (
    <>
      <header className="border-b border-rule-2 px-14 py-10">
        <p className="text-note text-ink-2">Frame trace</p>
        <h2 className="text-title break-words text-ink">
          {waysName(design, edited.question) || 'What is sent'}
        </h2>
        {second !== undefined && (
          <div className="mt-8">
            <SegmentedChoice
              label="Probe that is set here"
              small
              stretch
              value={shown}
              options={[
                { value: 'first', label: 'First' },
                { value: 'second', label: 'Second' },
              ]}
              onChange={setWhich}
            />
          </div>
        )}
      </header>
      <div className="px-14 py-12">
        <TraceForm
          design={design}
          question={edited.question}
          problems={edited.problems}
          onChange={(question) => put(shown, question)}
          picking={picking}
          onPick={setPicking}
          onSend={playback.play}
        />
      </div>
      {edited.result !== undefined && <TraceFigures design={design} result={edited.result} />}
    </>
  );
  return {
    ...tab,
    ...(second === undefined ? {} : { usualHeightPx: comparedHeightPx }),
    ...(decorations === undefined ? {} : { decorations }),
    ...(isStacked ? {} : { side }),
    ...(picking === undefined ? {} : { onPick }),
    panel: (
      <TracePanel
        design={design}
        first={first}
        second={second}
        shown={shown}
        onShow={setWhich}
        playback={playback}
        isBehind={behind}
        starts={() => traceStarts(design)}
        onAsk={(question) => change({ ...writeQuestion(question), ...writeVariation(question, undefined) })}
        onTakeOut={(of, { field }) => change({ [of === 'first' ? field : variedName(field)]: '' })}
        onCompare={(isOn) => {
          setWhich('first');
          change(writeVariation(first.question, isOn ? usualVariation(first) : undefined));
        }}
        onSend={(of, bytes) => put(of, { ...(of === 'second' && second ? second : first).question, bytes })}
        onShowFinding={onShowFinding}
        form={isStacked ? side : undefined}
      />
    ),
  };
}

const isOnPath = ({ collection }: ElementRef): boolean =>
  collection !== 'transports' && collection !== 'associations';
