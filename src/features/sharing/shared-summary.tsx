import { SeverityCounts, SeverityMark } from '../../components/severity-mark.tsx';
import { DataTable, type Column } from '../../components/data-table.tsx';
import type { SharedView } from '../../contract/shares.ts';
import { dayInWords } from '../../lib/format-time.ts';

type SharedSegment = SharedView['segments'][number];

const tunnelWords = ({ tunnels, protected: inIpsec }: SharedSegment): string => {
  if (tunnels === 0) return 'none';
  if (inIpsec === tunnels) return `${tunnels}, all inside IPsec`;
  return inIpsec === 0 ? `${tunnels}, none inside IPsec` : `${tunnels}, ${inIpsec} of them inside IPsec`;
};

const segmentColumns = (withSubnets: boolean): readonly Column<SharedSegment>[] => [
  { key: 'name', head: 'Segment', cell: ({ name }) => <span className="font-medium">{name}</span> },
  { key: 'sites', head: 'At', cell: ({ sites }) => sites.join(', ') },
  ...(withSubnets
    ? [{ key: 'subnets', head: 'Subnets', cell: ({ subnets }: SharedSegment) => subnets.join(', ') || '–' }]
    : []),
  { key: 'tunnels', head: 'Tunnels', cell: tunnelWords },
];

/** What the plan does, in plain words. */
export function SharedSummary({ view }: { readonly view: SharedView }) {
  const untrusted = view.transports.filter(({ trusted }) => !trusted).map(({ name }) => name);
  return (
    <section aria-labelledby="summary">
      <h2 id="summary" className="mb-6 text-section font-semibold">
        Summary
      </h2>
      <p className="mb-10 max-w-720 text-base text-ink-2">
        {count(view.segments.length, 'segment')} between {count(view.sites.length, 'site')}
        {view.transports.length > 0 && `, over ${view.transports.map(({ name }) => name).join(', ')}`}.
        {untrusted.length > 0 && ` Not trusted: ${untrusted.join(', ')}.`}
        {view.leftOut.length > 0 && ` Left out by whoever shares this: ${view.leftOut.join(' and ')}.`}
      </p>
      <DataTable
        caption="Segments"
        columns={segmentColumns(!view.leftOut.includes('addresses'))}
        rows={view.segments}
        rowKey={({ name }) => name}
      />
    </section>
  );
}

/** What the checks said of the revision when it was frozen, and what was accepted. */
export function SharedFindings({ findings }: { readonly findings: NonNullable<SharedView['findings']> }) {
  const { counts, open, waived } = findings;
  return (
    <section aria-labelledby="findings">
      <h2 id="findings" className="mb-6 text-section font-semibold">
        Findings
      </h2>
      <p className="mb-10">
        <SeverityCounts counts={counts} worded clear="No open finding" />
      </p>
      {open.length > 0 && (
        <ul className="mb-14 border border-rule-strong bg-field">
          {open.map(({ severity, sentence }) => (
            <li key={sentence} className="flex gap-12 border-t border-rule-2 px-14 py-6 first:border-t-0">
              <span className="w-100 shrink-0">
                <SeverityMark severity={severity} />
              </span>
              <span className="min-w-0 flex-1">{sentence}.</span>
            </li>
          ))}
        </ul>
      )}
      {waived.length > 0 && (
        <>
          <h3 className="mb-6 font-semibold">Waived</h3>
          <ul className="border border-rule-strong bg-field">
            {waived.map(({ sentence, reason, expiresOn }) => (
              <li key={sentence} className="border-t border-rule-2 px-14 py-6 first:border-t-0">
                {sentence}.
                <span className="block text-note text-ink-2">
                  {reason} Until {dayInWords(expiresOn)}.
                </span>
              </li>
            ))}
          </ul>
        </>
      )}
    </section>
  );
}

const count = (many: number, what: string): string => `${many} ${what}${many === 1 ? '' : 's'}`;
