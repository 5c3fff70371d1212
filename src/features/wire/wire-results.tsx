import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { anatomyRows } from './anatomy-rows.ts';
import { ByteAnatomy } from '../../components/byte-anatomy.tsx';
import { LayersTable, TreadsTable } from './figures-in-table.tsx';
import { paddingStaircase } from './padding-staircase.ts';
import { ResultCells } from './result-cells.tsx';
import { StaircaseChart } from './staircase-chart.tsx';
import type { WireFigures } from './wire-figures.ts';
import { workedResults } from './worked-results.ts';

/** What comes of the inputs: the packet as bytes, the verdict, every figure with its working, the padding. */
export function WireResults({
  figures,
  onSend,
}: {
  readonly figures: WireFigures;
  readonly onSend: (innerPacketBytes: number) => void;
}) {
  const { inward, outward, stack, innerIpVersion } = figures;
  const { largestInnerPacketBytes, ipMtuBytes } = inward;
  const treads = paddingStaircase(largestInnerPacketBytes, stack, innerIpVersion);
  const { innerPacketBytes, outerIpPacketBytes } = outward.totals;
  return (
    <div className="flex max-w-1130 min-w-0 flex-col gap-24">
      <section aria-label="The packet, byte by byte" className="border border-rule-strong bg-paper">
        <div className="px-14 pt-12 pb-14 max-sm:px-10">
          <ByteAnatomy
            rows={anatomyRows(figures)}
            summary={`A packet of ${innerPacketBytes} B becomes ${outerIpPacketBytes} B in a pipe of ${ipMtuBytes} B.`}
          />
          <LayersTable outward={outward} limitBytes={ipMtuBytes} />
        </div>
        <Verdict figures={figures} onSend={onSend} />
      </section>
      <ResultCells groups={workedResults(figures)} />
      <section aria-label="Padding around the limit">
        <h2 className="mb-4 text-section font-semibold">Padding around the limit</h2>
        <p className="mb-8 max-w-720 text-base text-ink-2">
          {stack.esp.mode === 'none'
            ? 'Without ESP every inner byte is an outer byte.'
            : 'ESP fills what it protects up to whole blocks, so the outer packet grows in steps: a byte more inside may cost nothing, or a whole step (RFC 4303 section 2.4).'}
        </p>
        <div className="border border-rule-strong bg-paper px-14 py-12 max-sm:px-10">
          <StaircaseChart
            treads={treads}
            limitBytes={ipMtuBytes}
            largestInnerPacketBytes={largestInnerPacketBytes}
          />
          <TreadsTable treads={treads} limitBytes={ipMtuBytes} />
        </div>
      </section>
    </div>
  );
}

function Verdict({
  figures: { inward, outward },
  onSend,
}: {
  readonly figures: WireFigures;
  readonly onSend: (innerPacketBytes: number) => void;
}) {
  const { largestInnerPacketBytes, ipMtuBytes } = inward;
  const { outerIpPacketBytes } = outward.totals;
  const over = outerIpPacketBytes - ipMtuBytes;
  const limit = `${ipMtuBytes} B${inward.limitedBy === 'access' ? ' that the access link leaves' : ''}`;
  return (
    <div
      className={`flex min-h-46 flex-wrap items-center gap-x-12 gap-y-8 border-t px-14 py-8 text-base max-sm:px-10 ${
        over > 0 ? 'border-red bg-red-wash' : 'border-ok bg-ok-wash'
      }`}
    >
      <p role="status" className="flex min-w-0 flex-1 items-center gap-10 max-sm:basis-full">
        {over > 0 ? (
          <>
            <SeverityShape severity="blocking" size={18} />
            <span>
              <strong className="font-semibold text-red">{`${over} B over. `}</strong>
              {`${outerIpPacketBytes} B do not pass ${limit} whole; ${largestInnerPacketBytes} B is the largest packet that does.`}
            </span>
          </>
        ) : (
          <>
            <Icon name="check" size={18} className="shrink-0 text-ok" />
            <span>
              <strong className="font-semibold text-ok">Passes whole. </strong>
              {`${outerIpPacketBytes} B in ${limit}, ${-over} to spare; ${largestInnerPacketBytes} B is the largest packet that passes.`}
            </span>
          </>
        )}
      </p>
      {over > 0 && (
        <Button kind="primary" onClick={() => onSend(largestInnerPacketBytes)}>
          Send {largestInnerPacketBytes} B instead
        </Button>
      )}
    </div>
  );
}
