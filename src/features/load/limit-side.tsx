import { useMemo } from 'react';
import { ElementLink } from '../../canvas/inspector/element-link.tsx';
import { Unknown } from '../../canvas/inspector/fields.tsx';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import type { HopLoad } from '../../engine/load/carried-direction.ts';
import type { LimitKind } from '../../engine/load/limits.ts';
import type { LoadReport } from '../../engine/load/load-of.ts';
import type { Design } from '../../engine/model/design.ts';
import type { Network } from '../../engine/network/network.ts';
import { packetRateText, rateText } from '../../lib/figure-texts.ts';
import { missingWords } from '../../workspace/operations/missing-words.ts';
import { demandName } from './demand-ways.ts';
import { limitParts, type LimitPart } from './limit-parts.ts';
import type { LimitRow } from './limit-rows.ts';
import { mostWords, roomWords, shareWords, usedWords } from './limit-words.ts';

const counts: Readonly<Record<LimitKind, string>> = {
  'port-speed': 'A port carries whole frames with preamble and gap, so those are counted.',
  'transport-rate':
    'What is ordered of a transport is counted in its IP packets: with ESP, UDP and VXLAN, without Ethernet.',
  'gateway-rate':
    'A gateway’s rate is measured with the hosts’ packets, so those are counted, once each time that it handles one.',
  'gateway-packets': 'A gateway handles frames one by one: their number counts, whatever their length.',
  'gateway-one-flow': 'Flows do not add up: the fullest one counts, a demand’s rate divided by its flows.',
};

interface LimitSideProps {
  readonly row: LimitRow;
  readonly network: Network;
  readonly report: LoadReport;
  readonly design: Design;
  readonly multiplier: number;
}

/** How a limit's figure comes about, demand by demand. */
export function LimitSide({ row, network, report, design, multiplier }: LimitSideProps) {
  const parts = useMemo(() => limitParts(network, report, row.limit?.key ?? row.key), [network, report, row]);
  const kind = row.limit?.kind;
  const missing = row.limit?.missing;
  return (
    <>
      <header>
        <p className="text-note text-ink-2">
          {row.group === 'tunnels' ? 'Tunnel' : 'Limit'}: {row.what}
        </p>
        <h2 className="text-title break-words text-ink">
          <ElementLink to={row.ref}>{row.name}</ElementLink>
        </h2>
        {row.way !== '' && <p className="text-base text-ink-2">{row.way}</p>}
      </header>
      <CellGrid columns={2}>
        <ReadCell label={row.limit?.kind === 'gateway-one-flow' ? 'Fullest flow' : 'Used'}>
          <Figure words={usedWords(row)} />
        </ReadCell>
        <ReadCell label="Of">
          <Figure words={mostWords(row)} />
        </ReadCell>
        {row.own !== undefined && (
          <ReadCell label="Of it this tunnel’s own" span={2}>
            {usedWords({ ...row, used: row.own })}
          </ReadCell>
        )}
        <ReadCell label="Share">
          <Figure words={shareWords(row)} />
        </ReadCell>
        <ReadCell label="Headroom">
          <Figure words={roomWords(row)} />
        </ReadCell>
      </CellGrid>
      {multiplier !== 1 && <p className="text-note text-ink-2">All demands taken {multiplier} times.</p>}
      {missing !== undefined && (
        <p className="text-base text-ink-2">
          Not known, and not zero: <ElementLink to={missing.ref}>{missingWords(design, missing)}</ElementLink>
        </p>
      )}
      <section aria-label="What adds up" className="flex flex-col gap-6">
        <h3 className="text-base font-semibold text-ink">
          {kind === 'gateway-one-flow' ? 'Flows that come by' : 'What adds up'}
        </h3>
        <PartsList parts={parts} design={design} kind={kind} />
        {kind !== undefined && <p className="text-note text-ink-3">{counts[kind]}</p>}
      </section>
    </>
  );
}

const Figure = ({ words }: { readonly words: string }) =>
  words === 'not known' ? <Unknown word={words} /> : words;

const isPackets = (measure: keyof HopLoad): boolean =>
  measure === 'framesPerSecond' || measure === 'packetsPerSecond';

function PartsList({
  parts,
  design,
  kind,
}: {
  readonly parts: readonly LimitPart[];
  readonly design: Design;
  readonly kind: LimitKind | undefined;
}) {
  if (parts.length === 0) return <p className="text-note text-ink-3">No demand comes by.</p>;
  return (
    <ul className="border-t border-rule">
      {parts.map(({ demand, way, load, measure }, at) => (
        // A gateway may handle a demand's packets twice: only the place tells the two apart.
        <li key={`${demand} ${way} ${at}`} className="flex gap-8 border-b border-rule py-4 text-base">
          <span className="min-w-0 flex-1">
            <ElementLink to={{ collection: 'demands', id: demand }}>{demandName(design, demand)}</ElementLink>{' '}
            <span className="text-ink-2">{way === 'forward' ? 'there' : 'back'}</span>
            {load !== undefined && measure !== 'innerRateBps' && !isPackets(measure) && (
              <span className="block text-note text-ink-2">
                {rateText(load.innerRateBps)} of packets, grown
              </span>
            )}
            {load !== undefined && kind === 'gateway-one-flow' && (
              <span className="block text-note text-ink-2">{flowsWords(design, demand)}</span>
            )}
          </span>
          <span className="text-right whitespace-nowrap text-ink">
            {load === undefined ? (
              <Unknown word="not known" />
            ) : isPackets(measure) ? (
              packetRateText(load[measure])
            ) : (
              rateText(load[measure])
            )}
          </span>
        </li>
      ))}
    </ul>
  );
}

const flowsWords = (design: Design, demand: string): string => {
  const flows = design.demands[demand]?.flows;
  return flows === undefined ? 'flows not stated' : flows === 1 ? 'in 1 flow' : `in ${flows} flows`;
};
