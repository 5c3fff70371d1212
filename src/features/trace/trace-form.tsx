import { useId, useMemo, useRef, useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { ComboCell } from '../../components/combo-cell.tsx';
import { ChoiceCell, CommitCell, NumberCell, SelectCell } from '../../components/field-cells.tsx';
import { Icon } from '../../components/icon.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import type { Design } from '../../engine/model/design.ts';
import { IP_HEADER_BYTES, LARGEST_IP_PACKET_BYTES } from '../../engine/reference/ip.ts';
import type { ProbeInput } from '../../engine/trace/probe.ts';
import { reservedGroupNames } from '../../engine/trace/reserved-groups.ts';
import { segmentOf } from './segment-of.ts';
import { readQuestion, readTags, sourceText, writeTags } from './trace-address.ts';
import { hostOptions, sourceOptions } from './trace-places.ts';
import {
  fieldLabels,
  missingField,
  probeOf,
  type FieldProblem,
  type QuestionField,
  type TraceQuestion,
} from './trace-question.ts';
import { sendOf, sends } from './trace-sends.ts';

export type PickEnd = 'from' | 'to';

interface TraceFormProps {
  readonly design: Design;
  readonly question: TraceQuestion;
  readonly problems: readonly FieldProblem[];
  readonly onChange: (question: TraceQuestion) => void;
  /** The end that the next press on the sheet names. */
  readonly picking: PickEnd | undefined;
  readonly onPick: (end: PickEnd | undefined) => void;
  readonly onSend: () => void;
}

const prescribed = (destination: ProbeInput['destination'] | undefined): string => {
  switch (destination?.kind) {
    case 'broadcast':
      return 'All, as a broadcast';
    case 'multicast':
      return destination.group;
    case 'layer-2-group':
      return destination.mac;
    case 'reserved': {
      const name = reservedGroupNames[destination.octet];
      return `01-80-C2-00-00-${destination.octet.toUpperCase()}${name === undefined ? '' : `, ${name}`}`;
    }
    default:
      return 'As the protocol has it';
  }
};

const missingWords = {
  from: 'From is empty: choose a host or a port, or pick one on the sheet.',
  to: 'To is empty: choose a host, or pick one on the sheet.',
} as const;

/** What is followed: from where, to where, and what it is. Every change is followed at once. */
export function TraceForm({ design, question, problems, onChange, picking, onPick, onSend }: TraceFormProps) {
  const noteId = useId();
  const missingId = useId();
  const form = useRef<HTMLDivElement>(null);
  /** Somebody wanted to send without an end: the cell that lacks it says so from then on. */
  const [isAskedFor, setIsAskedFor] = useState(false);
  const missing = missingField(question);
  const sources = useMemo(() => sourceOptions(design), [design]);
  const hosts = useMemo(() => hostOptions(design), [design]);
  const send = sendOf(question.send)!;
  const probe = useMemo(() => probeOf(design, question), [design, question]);
  const problemOf = (field: QuestionField): string | undefined => {
    const found = problems.find((problem) => problem.field === field);
    if (found !== undefined) return `${fieldLabels[field]} is ${found.value}: expected ${found.expected}.`;
    return isAskedFor && field === missing ? missingWords[missing] : undefined;
  };
  const put = (change: Partial<TraceQuestion>): void => {
    const next: { -readonly [field in keyof TraceQuestion]: TraceQuestion[field] } = {
      ...question,
      ...change,
    };
    onChange(next);
  };
  const pickButton = (end: PickEnd) => (
    <Button
      small
      pressed={picking === end}
      aria-label={`Pick ${end === 'from' ? 'From' : 'To'} on the sheet`}
      onClick={() => onPick(picking === end ? undefined : end)}
    >
      Pick
    </Button>
  );
  return (
    <div ref={form} className="flex flex-col gap-12">
      <CellGrid>
        <ComboCell
          label="From"
          value={question.from === undefined ? '' : sourceText(question.from)}
          options={sources}
          placeholder="A host or a port"
          none="No host or port of that name"
          error={problemOf('from')}
          after={pickButton('from')}
          onChange={(text) => put({ from: readQuestion(design, { from: text }).question.from })}
        />
        {send.to === 'host' && (
          <ComboCell
            label="To"
            value={question.to ?? ''}
            options={hosts}
            placeholder="A host"
            none="No host of that name"
            error={problemOf('to')}
            after={pickButton('to')}
            onChange={(to) => put({ to })}
          />
        )}
        {send.to === 'group' && (
          <CommitCell
            label="To, a group"
            value={question.to ?? ''}
            placeholder={prescribed(probe?.destination)}
            error={problemOf('to')}
            onCommit={(to) => put({ to: to === '' ? undefined : to })}
          />
        )}
        {send.to === 'prescribed' && <ReadCell label="To">{prescribed(probe?.destination)}</ReadCell>}
        <SegmentCell design={design} question={question} />
      </CellGrid>
      {picking !== undefined && (
        <p id={noteId} role="status" className="-mt-4 text-note text-blue">
          Press {picking === 'from' ? 'a host or a port' : 'a host'} on the sheet. Esc leaves it as it is.
        </p>
      )}
      <PacketCells {...{ design, question, probe, problemOf, put, onChange }} />
      <div>
        <Button
          kind="primary"
          className="w-full"
          icon={<Icon name="play" size={14} />}
          aria-describedby={missing === undefined ? undefined : missingId}
          onClick={() => {
            if (missing === undefined) return onSend();
            setIsAskedFor(true);
            const ends = form.current?.querySelectorAll<HTMLElement>('[role="combobox"]');
            ends?.[missing === 'from' ? 0 : 1]?.focus();
          }}
        >
          Send it
        </Button>
        {missing !== undefined && (
          <p id={missingId} className="mt-5 text-note text-ink-2">
            {missingWords[missing]}
          </p>
        )}
      </div>
      <p className="text-note text-ink-3">{send.shows}</p>
    </div>
  );
}

function SegmentCell({ design, question }: Pick<TraceFormProps, 'design' | 'question'>) {
  const found = question.from === undefined ? undefined : segmentOf(design, question.from);
  const segment = found === undefined ? undefined : design.segments[found.id];
  return (
    <ReadCell label="Segment">
      {segment === undefined ? (
        <span className="text-ink-3">{question.from === undefined ? 'As From has it' : 'None known'}</span>
      ) : (
        <span className="flex items-center gap-8">
          <SegmentSwatch letter={segment.letter} />
          <span>
            {segment.name}
            {found?.vlan !== undefined && `, VLAN ${found.vlan}`}
          </span>
        </span>
      )}
    </ReadCell>
  );
}

interface PacketCellsProps {
  readonly question: TraceQuestion;
  readonly probe: ProbeInput | undefined;
  readonly problemOf: (field: QuestionField) => string | undefined;
  readonly put: (change: Partial<TraceQuestion>) => void;
  readonly onChange: (question: TraceQuestion) => void;
}

function PacketCells({ question, probe, problemOf, put, onChange }: PacketCellsProps) {
  const send = sendOf(question.send)!;
  const packet = probe?.packet;
  const ip = packet?.kind === 'ip' ? packet : undefined;
  const isIp = ip !== undefined || send.versions.length > 0 || send.to === 'group';
  const version = ip?.version ?? send.versions[0] ?? 'ipv4';
  const bytes = ip?.packetBytes ?? (packet?.kind === 'non-ip' ? packet.frameBytes : question.bytes);
  const least = isIp ? IP_HEADER_BYTES[version] : 64;
  // Frames beyond this no Ethernet equipment is asked to carry: common practice, no source.
  const most = isIp ? LARGEST_IP_PACKET_BYTES.ipv4 : 9018;
  return (
    <CellGrid columns={2}>
      <SelectCell
        label="What is sent"
        span={2}
        value={question.send}
        error={problemOf('send')}
        options={sends.map(({ id, name }) => ({ value: id, label: name }))}
        // Sizes, DF and TTL are those of what was sent before; a host stays the same host.
        onChange={(next) => {
          const { from, to, tags, isLearned } = question;
          const sameKind = sendOf(next)!.to === send.to;
          onChange({
            send: next,
            ...(from === undefined ? {} : { from }),
            ...(to === undefined || !sameKind ? {} : { to }),
            ...(tags === undefined ? {} : { tags }),
            ...(isLearned === undefined ? {} : { isLearned }),
          });
        }}
      />
      <NumberCell
        label={isIp ? 'IP packet, bytes' : 'Frame, bytes'}
        value={bytes}
        min={least}
        max={most}
        error={problemOf('bytes')}
        onCommit={(value) => put({ bytes: value })}
      />
      <ChoiceCell
        label="DF"
        value={!isIp ? undefined : (ip?.dontFragment ?? question.dontFragment) === true ? 'yes' : 'no'}
        options={[
          { value: 'yes', label: 'set' },
          { value: 'no', label: 'clear' },
        ]}
        disabled={!isIp}
        error={problemOf('df')}
        onChange={(value) => put({ dontFragment: value === 'yes' })}
      />
      <NumberCell
        label={version === 'ipv6' ? 'Hop limit' : 'TTL'}
        value={isIp ? (ip === undefined ? question.hopLimit : (ip.hopLimit ?? 64)) : undefined}
        min={1}
        max={255}
        disabled={!isIp}
        error={problemOf('ttl')}
        onCommit={(value) => put({ hopLimit: value })}
      />
      <CommitCell
        label="Tags"
        value={question.tags === undefined ? '' : writeTags(question.tags)}
        placeholder="as the port has it"
        error={problemOf('tags')}
        validate={(text) =>
          text === '' || readTags(text) !== undefined
            ? undefined
            : `Tags ${text}: type one VLAN, two as outer-inner such as 200-110, or none.`
        }
        onCommit={(text) => put({ tags: text === '' ? undefined : readTags(text) })}
      />
      {send.versions.length > 1 && (
        <ChoiceCell
          label="IP version"
          span={send.to === 'host' ? 1 : 2}
          value={version}
          options={[
            { value: 'ipv4', label: '4' },
            { value: 'ipv6', label: '6' },
          ]}
          error={problemOf('ip')}
          onChange={(value) => put({ version: value })}
        />
      )}
      {send.to === 'host' && (
        <ChoiceCell
          label="Far MAC"
          span={send.versions.length > 1 ? 1 : 2}
          value={question.isLearned === false ? 'no' : 'yes'}
          options={[
            { value: 'yes', label: 'learned' },
            { value: 'no', label: 'not' },
          ]}
          error={problemOf('far')}
          onChange={(value) => put({ isLearned: value === 'yes' ? undefined : false })}
        />
      )}
    </CellGrid>
  );
}
