import type { ReactNode } from 'react';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Assumption } from '../../engine/trace/trace.ts';
import { ICMP_ECHO_HEADER_BYTES } from '../../engine/reference/ip.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import type { TraceResult } from './trace-result.ts';
import { waysOut } from './ways-out.ts';

const bytesText = (bytes: number | undefined): string => (bytes === undefined ? 'not known' : `${bytes} B`);

function Part({ title, children }: { readonly title: string; readonly children: ReactNode }) {
  return (
    <section className="border-t border-rule-2 px-14 py-12">
      <h3 className="mb-8 text-base font-semibold text-ink">{title}</h3>
      {children}
    </section>
  );
}

// Of a long list nobody reads the end; the number says how much more there is.
const mostNamed = 12;
const namesOf = (design: Design, refs: readonly ElementRef[]): string => {
  const names = refs.slice(0, mostNamed).map((ref) => nameOf(design, ref));
  const more = refs.length - names.length;
  return `${names.join(', ')}${more > 0 ? ` and ${more} more` : ''}`;
};

/** What was assumed of several elements alike, said once. */
const assumedAlike = (
  assumptions: readonly Assumption[],
): readonly (Pick<Assumption, 'code' | 'words'> & { readonly alsoOf: readonly ElementRef[] })[] => {
  const byCode = new Map<Assumption['code'], Assumption[]>();
  for (const one of assumptions) byCode.set(one.code, [...(byCode.get(one.code) ?? []), one]);
  return [...byCode.values()].map(([first, ...others]) => ({
    code: first!.code,
    words: first!.words,
    alsoOf: others.map(({ element }) => element),
  }));
};

/** What fits on the way, what would help, who goes without, and what had to be taken for granted. */
export function TraceFigures({ design, result }: { readonly design: Design; readonly result: TraceResult }) {
  const { fits, missed, trace, probe } = result;
  const ways = waysOut(design, trace, fits);
  const isIp = probe.packet.kind === 'ip';
  const assumed = assumedAlike(trace.assumptions);
  const { limitedBy } = fits ?? {};
  return (
    <>
      {isIp && (
        <Part
          title={
            probe.destination.kind === 'host' ? 'What fits on this path' : 'What fits on all these paths'
          }
        >
          {fits === undefined ? (
            <p className="text-base text-ink-2">Not even the shortest packet gets there.</p>
          ) : (
            <>
              <CellGrid columns={2}>
                <ReadCell label="Largest IP packet">{bytesText(fits.largestBytes)}</ReadCell>
                <ReadCell label="TCP MSS to set">{bytesText(fits.tcpMssBytes)}</ReadCell>
                <ReadCell label="MTU for 1500 whole">{bytesText(fits.transportMtuFor1500Bytes)}</ReadCell>
                <ReadCell label="Ping to test, DF">{bytesText(fits.pingPayloadBytes)}</ReadCell>
              </CellGrid>
              <p className="mt-6 text-note text-ink-3">
                {limitedBy !== undefined &&
                  `${kindOf(design, limitedBy)} ${nameOf(design, limitedBy)} sets it. `}
                The ping’s size is its payload, {ICMP_ECHO_HEADER_BYTES} B of header left out.
              </p>
            </>
          )}
        </Part>
      )}
      {ways.length > 0 && (
        <Part title="Ways out">
          <ol className="flex flex-col gap-8 text-base text-ink">
            {ways.map((way, at) => (
              <li key={way} className="flex gap-10">
                <span aria-hidden="true" className="font-semibold">
                  {at + 1}
                </span>
                <span>{way}</span>
              </li>
            ))}
          </ol>
        </Part>
      )}
      {trace.assumptions.length > 0 && (
        <Part title="Taken for granted">
          <ul className="flex flex-col gap-8 text-note text-ink-2">
            {assumed.map(({ code, words, alsoOf }) => (
              <li key={code}>
                {words}
                {alsoOf.length > 0 && ` The same of ${namesOf(design, alsoOf)}.`}
              </li>
            ))}
          </ul>
        </Part>
      )}
      {missed.length > 0 && (
        <p className="border-t border-rule-2 px-14 py-12 text-base text-ink-2">
          Not reached: {namesOf(design, missed)}.
        </p>
      )}
    </>
  );
}
