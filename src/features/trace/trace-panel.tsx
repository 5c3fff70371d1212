import { useState, type ReactNode } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { rowsAsCsv } from '../../components/table-view.ts';
import { paletteOf } from '../../drawing/theme/segment-tokens.ts';
import type { Design } from '../../engine/model/design.ts';
import { classNames } from '../../lib/class-names.ts';
import { copyText } from './copy-text.ts';
import { HopStrip } from './hop-strip.tsx';
import { hopColumns, HopsTable } from './hops-table.tsx';
import { partOfWays, partWords } from './part-of-ways.ts';
import { PlayBar } from './play-bar.tsx';
import { segmentOf } from './segment-of.ts';
import { StormRounds } from './storm-rounds.tsx';
import { TraceEmpty } from './trace-empty.tsx';
import { fieldLabels, missingField, type FieldProblem, type TraceQuestion } from './trace-question.ts';
import type { TraceResult } from './trace-result.ts';
import type { TraceStart } from './trace-starts.ts';
import { frameWords, traceText, variationWords, waysName } from './trace-words.ts';
import type { Playback } from './use-playback.ts';
import { VerdictBar } from './verdict-bar.tsx';

/** One probe with what came of it. */
export interface TracedProbe {
  readonly question: TraceQuestion;
  readonly result: TraceResult | undefined;
  readonly problems: readonly FieldProblem[];
}

export type Which = 'first' | 'second';

interface TracePanelProps {
  readonly design: Design;
  readonly first: TracedProbe;
  readonly second: TracedProbe | undefined;
  /** Which of the two the sheet shows. */
  readonly shown: Which;
  readonly onShow: (which: Which) => void;
  readonly playback: Playback;
  /** A newer version of the design waits to be followed. */
  readonly isBehind: boolean;
  readonly starts: () => readonly TraceStart[];
  readonly onAsk: (question: TraceQuestion) => void;
  /** Takes a value that can't be read out of the address. */
  readonly onTakeOut: (which: Which, problem: FieldProblem) => void;
  readonly onCompare: (isOn: boolean) => void;
  readonly onSend: (which: Which, bytes: number) => void;
  readonly onShowFinding: (key: string) => void;
  /** The form, where it has no place beside the sheet. */
  readonly form: ReactNode;
}

/** The drawer's Frame trace: hops with their bytes, the verdict, and a second probe beside the first. */
export function TracePanel(props: TracePanelProps) {
  const { first, second, form, design, starts, onAsk, onTakeOut } = props;
  const [isSettingUp, setSettingUp] = useState(false);
  const problems = [
    ...first.problems.map((problem) => ({ which: 'first' as const, problem })),
    ...(second?.problems ?? []).map((problem) => ({ which: 'second' as const, problem })),
  ];
  const missing = missingField(first.question);
  const content =
    problems.length > 0 ? (
      <div className="flex h-full flex-col gap-8 overflow-y-auto bg-raise p-14">
        {problems.map(({ which, problem }) => (
          <ErrorNotice
            key={`${which} ${problem.field} ${problem.expected}`}
            action={
              <Button small onClick={() => onTakeOut(which, problem)}>
                Take it out
              </Button>
            }
          >
            {which === 'second' && 'Second probe: '}
            {fieldLabels[problem.field]} is {problem.value}: expected {problem.expected}.
          </ErrorNotice>
        ))}
        <p className="text-base text-ink-2">Nothing is followed until this is mended.</p>
      </div>
    ) : first.result === undefined ? (
      <div className="flex h-full flex-col">
        {missing === 'to' && (
          <p role="status" className="border-b border-rule-2 bg-panel px-14 py-8 text-base text-ink">
            {waysName(design, first.question)} sends it to whom? Choose To, or pick a host on the sheet.
          </p>
        )}
        <div className="min-h-0 flex-1">
          <TraceEmpty starts={starts()} onStart={onAsk} />
        </div>
      </div>
    ) : (
      <Followed {...props} first={{ ...first, result: first.result }} />
    );
  if (form === undefined) return content;
  return (
    <div className="flex h-full flex-col">
      <div className="shrink-0 border-b border-rule-2 bg-panel px-8 py-6">
        <SegmentedChoice
          label="Shown in the drawer"
          small
          stretch
          value={isSettingUp ? 'form' : 'hops'}
          options={[
            { value: 'form', label: 'What is sent' },
            { value: 'hops', label: 'Hops' },
          ]}
          onChange={(value) => setSettingUp(value === 'form')}
        />
      </div>
      <div className="min-h-0 flex-1 overflow-y-auto">{isSettingUp ? form : content}</div>
    </div>
  );
}

const sentWords = ({ probe, trace }: TraceResult): string => {
  if (trace.steps[0]?.pieces !== undefined) return 'Longest piece';
  return probe.packet.kind === 'ip' ? 'IP packet as sent' : 'Payload as sent';
};

function Followed({
  design,
  first,
  second,
  shown,
  onShow,
  playback,
  isBehind,
  onCompare,
  onSend,
  onShowFinding,
  form,
}: TracePanelProps & { readonly first: TracedProbe & { readonly result: TraceResult } }) {
  const [view, setView] = useState<'strip' | 'table'>('strip');
  const isStacked = form !== undefined;
  const other =
    second?.result === undefined ? undefined : { question: second.question, result: second.result };
  const chosen = shown === 'second' && other !== undefined ? other : first;
  const title = `${waysName(design, chosen.question)}, ${frameWords(chosen.question, chosen.result)}`;
  const fileName = `trace-${waysName(design, chosen.question).replace(/[^a-z0-9]+/gi, '-')}`;
  const strip = ({
    question,
    result,
  }: {
    readonly question: TraceQuestion;
    readonly result: TraceResult;
  }) => {
    const segment = question.from === undefined ? undefined : segmentOf(design, question.from);
    const letter = segment === undefined ? undefined : design.segments[segment.id]?.letter;
    return (
      <HopStrip
        label={`Hops, ${waysName(design, question)}`}
        rows={result.rows}
        hopCount={result.hops.length}
        palette={letter === undefined ? 'none' : paletteOf(letter)}
        sentWords={sentWords(result)}
        playback={playback}
      />
    );
  };
  const verdict = (
    which: Which,
    { result }: { readonly result: TraceResult },
    isCompared: boolean,
  ): ReactNode => {
    const { findingKey, insteadBytes } = result.verdict;
    return (
      <VerdictBar
        verdict={result.verdict}
        {...(isCompared ? { which: which === 'first' ? 'First' : 'Second' } : {})}
        {...(findingKey === undefined ? {} : { onShowFinding: () => onShowFinding(findingKey) })}
        {...(insteadBytes === undefined ? {} : { onSendInstead: () => onSend(which, insteadBytes) })}
      />
    );
  };
  const isSideBySide = other !== undefined && !isStacked && view === 'strip';
  const { storm } = chosen.result.trace;
  const endings = isSideBySide ? (
    <div className="grid shrink-0 grid-cols-2 divide-x divide-rule-2">
      {verdict('first', first, true)}
      {verdict('second', other, true)}
    </div>
  ) : (
    verdict(chosen === first ? 'first' : 'second', chosen, other !== undefined)
  );
  return (
    // Stacked the drawer is too low for a strip that scrolls by itself: all of it scrolls, the verdict first.
    <div
      className={classNames('flex min-h-0 flex-col', !isStacked && 'h-full')}
      aria-busy={isBehind || undefined}
    >
      {isStacked && endings}
      <PlayBar playback={playback} count={Math.max(first.result.hops.length, other?.result.hops.length ?? 0)}>
        {other === undefined ? (
          <span className="min-w-0 truncate text-base text-ink-2 max-lg:hidden">{title}</span>
        ) : (
          <SegmentedChoice
            label="Probe that the sheet shows"
            small
            value={shown}
            options={[
              { value: 'first', label: 'First' },
              { value: 'second', label: 'Second' },
            ]}
            onChange={onShow}
          />
        )}
        <Button
          small
          pressed={view === 'table'}
          onClick={() => setView(view === 'table' ? 'strip' : 'table')}
        >
          Table
        </Button>
        <Button small pressed={second !== undefined} onClick={() => onCompare(second === undefined)}>
          Compare
        </Button>
        <Menu
          align="end"
          trigger={
            <Button small icon={<Icon name="chevron-down" size={12} />}>
              Copy
            </Button>
          }
          groups={[
            {
              actions: [
                {
                  label: 'Link to this trace',
                  onSelect: () => void copyText('Link', window.location.href, `${fileName}-link.txt`),
                },
                {
                  label: 'Hops as text',
                  onSelect: () => void copyText('Hops', traceText(title, chosen.result), `${fileName}.txt`),
                },
                {
                  label: 'Hops as CSV',
                  onSelect: () =>
                    void copyText(
                      'Hops',
                      rowsAsCsv(hopColumns(chosen.result), chosen.result.hops),
                      `${fileName}.csv`,
                    ),
                },
              ],
            },
          ]}
        />
      </PlayBar>
      {other !== undefined && (
        <p role="status" className="shrink-0 border-b border-rule-2 bg-panel px-12 py-5 text-base text-ink">
          <span className="font-semibold">Second with {variationWords(first.question, other.question)}.</span>{' '}
          {partWords(partOfWays(first.result, other.result))}
        </p>
      )}
      {storm !== undefined && view === 'strip' && <StormRounds design={design} storm={storm} />}
      <div className={isStacked ? 'h-[70dvh]' : 'min-h-0 flex-1'}>
        {view === 'table' ? (
          <HopsTable key={shown} result={chosen.result} caption={`Hops, ${title}`} />
        ) : isSideBySide ? (
          <div className="grid h-full min-h-0 grid-cols-2 divide-x divide-rule-2">
            {strip(first)}
            {strip(other)}
          </div>
        ) : (
          strip(chosen)
        )}
      </div>
      {!isStacked && endings}
    </div>
  );
}
