import { ElementLink } from '../../canvas/inspector/element-link.tsx';
import { Unknown } from '../../canvas/inspector/fields.tsx';
import { Button } from '../../components/button.tsx';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import type { Hop } from '../../engine/load/carried-direction.ts';
import type { Design } from '../../engine/model/design.ts';
import { durationText, lossText, rateText } from '../../lib/figure-texts.ts';
import { missingWords } from '../../workspace/operations/missing-words.ts';
import type { DemandWayRow } from './demand-ways.ts';
import { elementWords } from './demand-ways.ts';
import { OneFlow } from './one-flow.tsx';

interface DemandSideProps {
  readonly row: DemandWayRow;
  /** The other way of the same demand: a round trip needs both. */
  readonly back: DemandWayRow | undefined;
  readonly design: Design;
  readonly editable: boolean;
  readonly windowBytes: number | undefined;
  readonly onEdit: () => void;
}

/** One way of a demand, hop by hop, and what TCP makes of it. */
export function DemandSide({ row, back, design, editable, windowBytes, onEdit }: DemandSideProps) {
  const { direction } = row;
  return (
    <>
      <header>
        <p className="text-note text-ink-2">Demand, {row.way === 'forward' ? 'there' : 'back'}</p>
        <h2 className="text-title break-words text-ink">{row.name}</h2>
        <p className="flex items-center gap-6 text-base text-ink-2">
          <SegmentSwatch letter={row.letter} squarePx={15} cordPx={14} />
          {row.from} to {row.to}
        </p>
      </header>
      <Button small className="self-start" onClick={onEdit}>
        {editable ? 'Edit the demand' : 'Show the demand'}
      </Button>
      <CellGrid columns={2}>
        <Figure label="Rate" of={row.offeredBps} words={rateText} />
        <Figure label="In the tunnel" of={row.grownBps} words={rateText} />
        <Figure label="Latency, one way" of={row.latencyUs} words={durationText} />
        <Figure label="Latency allowed" of={row.allowedUs} words={durationText} absent="none stated" />
        <Figure label="Loss" of={row.lossPerMillion} words={lossText} />
        <Figure label="Longest packet" of={row.reachable?.packetBytes} words={(bytes) => `${bytes} B`} />
      </CellGrid>
      {direction.state === 'carried' ? (
        <>
          {direction.tooLong.map(({ tunnel, packetBytes, largestBytes }) => (
            <p key={tunnel} className="text-base text-degr">
              Packets of {packetBytes} B do not pass{' '}
              <ElementLink to={{ collection: 'tunnels', id: tunnel }} />: it carries {largestBytes} B.
            </p>
          ))}
          <section aria-label="Hop by hop" className="flex flex-col gap-6">
            <h3 className="text-base font-semibold text-ink">Hop by hop</h3>
            <ol className="border-t border-rule">
              {direction.hops.map((hop, at) => (
                <HopLine key={`${hop.crossing.id} ${at}`} hop={hop} number={at + 1} design={design} />
              ))}
            </ol>
            {direction.missing.length > 0 && (
              <p className="text-note text-ink-2">
                Not known: {direction.missing.map((missing) => missingWords(design, missing)).join('; ')}.
              </p>
            )}
          </section>
          {row.reachable !== undefined && (
            <OneFlow
              reachable={row.reachable}
              design={design}
              rttUs={
                row.latencyUs === undefined || back?.latencyUs === undefined
                  ? undefined
                  : row.latencyUs + back.latencyUs
              }
              lossPerMillion={row.lossPerMillion}
              windowBytes={windowBytes ?? design.demands[row.demand]?.windowBytes}
            />
          )}
        </>
      ) : (
        <p className="text-base text-red">Not carried: {row.path}.</p>
      )}
    </>
  );
}

function Figure({
  label,
  of,
  words,
  absent = 'not known',
}: {
  readonly label: string;
  readonly of: number | undefined;
  readonly words: (value: number) => string;
  readonly absent?: string;
}) {
  return <ReadCell label={label}>{of === undefined ? <Unknown word={absent} /> : words(of)}</ReadCell>;
}

function HopLine({
  hop,
  number,
  design,
}: {
  readonly hop: Hop;
  readonly number: number;
  readonly design: Design;
}) {
  const { crossing, load } = hop;
  const ref = { collection: crossing.collection, id: crossing.id } as const;
  return (
    <li className="flex gap-8 border-b border-rule py-4 text-base">
      <span className="w-14 shrink-0 text-right font-semibold text-ink-2">{number}</span>
      <span className="min-w-0 flex-1">
        <ElementLink to={ref}>{elementWords(design, ref)}</ElementLink>
        {load !== undefined && load.framesPerSecond > load.packetsPerSecond && (
          <span className="block text-note text-ink-2">packets are cut into fragments</span>
        )}
      </span>
      <span className="text-right whitespace-nowrap">
        {load === undefined ? (
          <Unknown word="not known" />
        ) : (
          <>
            {rateText(load.wireRateBps)}
            <span className="block text-note text-ink-2">on the wire</span>
          </>
        )}
      </span>
    </li>
  );
}
