import { useMemo, useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid, FieldError, ReadCell } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { CheckCell, CommitCell, SelectCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { SeverityCounts, SeverityShape } from '../../components/severity-mark.tsx';
import { showToast } from '../../components/toast.tsx';
import type { Design } from '../../engine/model/design.ts';
import { applyPatch } from '../../engine/model/merge-patch.ts';
import { rules } from '../../engine/rules/index.ts';
import { countBySeverity, runRules } from '../../engine/rules/run-rules.ts';
import type { SegmentShape } from '../../engine/stretch/segment-shape.ts';
import { segmentShape } from '../../engine/stretch/segment-shape.ts';
import type { LandingPlan, SitePlan } from '../../engine/stretch/stretch-form.ts';
import type { StretchToRequest } from '../../engine/stretch/stretch-to.ts';
import { stretchTo } from '../../engine/stretch/stretch-to.ts';
import type { Problem } from '../../engine/wire/problem.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { newEntryId, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { gateways, LandingCells } from './landing-cells.tsx';
import { problemAt, problemSentence } from './problem-words.ts';
import { putOnSheet } from './put-on-sheet.ts';

const newSite = 'New';

const byName = (entries: { readonly [id: string]: { readonly name: string } }, ids: readonly string[]) =>
  ids
    .map((id) => ({ value: id, label: entries[id]!.name }))
    .sort((a, b) => a.label.localeCompare(b.label, 'en', { numeric: true }));

const shapeWords = (design: Design, { kind, partners, joined }: SegmentShape): string => {
  const names = partners.map((id) => design.sites[id]!.name).join(', ');
  if (kind === 'hub') return `${names}, the hub`;
  if (kind === 'mesh') return `each of ${joined.length} sites, as a full mesh`;
  return names;
};

const tally = (n: number, one: string, many: string): string => `${n} ${n === 1 ? one : many}`;

/** What a design has more of than before, in words. */
const added = (before: Design, after: Design): string => {
  const more = (collection: 'sites' | 'associations' | 'tunnels'): number =>
    Object.keys(after[collection]).length - Object.keys(before[collection]).length;
  return [
    more('sites') > 0 ? tally(more('sites'), 'site', 'sites') : '',
    tally(more('tunnels'), 'tunnel', 'tunnels'),
    more('associations') > 0 ? tally(more('associations'), 'association', 'associations') : '',
  ]
    .filter((text) => text !== '')
    .join(', ');
};

const fieldNames: Readonly<Record<string, string>> = {
  from: 'Joined to',
  segment: 'Segment',
  site: 'Site',
  'pools.loopbacks': 'Loopbacks',
  'pools.vnis': 'VNIs',
  'pools.vlans': 'VLANs',
};

/** One more site for a segment, joined as the segment's shape asks. */
export function StretchToDialog({
  segment,
  onClose,
}: {
  readonly segment: string;
  readonly onClose: () => void;
}) {
  const open = useOpenDesign();
  const document = useOpenState((state) => state.document);
  const { numbering, findings } = useChecks();
  const { name, mtu } = document.segments[segment]!;
  const shape = useMemo(() => segmentShape(document, segment), [document, segment]);
  const elsewhere = Object.keys(document.sites).filter(
    (id) => !shape.joined.includes(id) && !(shape.kind === 'alone' && shape.partners.includes(id)),
  );
  const transports = byName(document.transports, Object.keys(document.transports));
  const [site, setSite] = useState<string>(() => byName(document.sites, elsewhere)[0]?.value ?? newSite);
  const [plan, setPlan] = useState<SitePlan>({
    key: 'new',
    name: '',
    gateway: 'firewall',
    landings: [{ transport: transports[0]?.value ?? '' }],
  });
  const [from, setFrom] = useState<string | undefined>(
    () => shape.partners[0] ?? (shape.choices.length === 1 ? shape.choices[0] : undefined),
  );
  const [sampleHost, setSampleHost] = useState(true);
  const [lowerMtu, setLowerMtu] = useState(false);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<string>();
  const leavesChoice = shape.kind !== 'mesh' && shape.kind !== 'hub' && shape.choices.length > 1;

  const request: StretchToRequest = {
    segment,
    site: site === newSite ? plan : site,
    ...(leavesChoice && from !== undefined ? { from } : {}),
    sampleHost,
    lowerMtu,
  };
  const isUntouched = site === newSite && plan.name === '';
  const key = JSON.stringify(request);
  const answer = useMemo(
    () =>
      stretchTo(JSON.parse(key) as StretchToRequest, { design: document, newId: (stem) => stem, numbering }),
    [key, document, numbering],
  );
  const after = useMemo(
    () => (answer.ok ? applyPatch(document, answer.patch) : undefined),
    [answer, document],
  );
  const found = useMemo(() => {
    if (after === undefined) return [];
    const before = new Set(findings.map((finding) => finding.key));
    return runRules(after, numbering).filter((finding) => !before.has(finding.key));
  }, [after, findings, numbering]);
  const problems: readonly Problem[] = answer.ok || isUntouched ? [] : answer.problems;
  const needsLower = lowerMtu || problems.some(({ field }) => field === 'lowerMtu');
  const others = problems.filter(
    ({ field }) => !/^(lowerMtu|site\.name|site\.landings\.0\.(address|transport)|from)$/.test(field),
  );

  const submit = async (): Promise<void> => {
    const done = stretchTo(request, { design: document, newId: newEntryId, numbering });
    if (!done.ok) return;
    setBusy(true);
    const label = `Stretch ${name} to ${applyPatch(document, done.patch).sites[done.site]!.name}`;
    const why = await putOnSheet(open, label, done.patch, site === newSite ? undefined : done.site);
    setBusy(false);
    if (why !== undefined) return setFailure(why);
    open.select([{ collection: 'sites', id: done.site }]);
    showToast({
      tone: 'done',
      text: `${label.replace('Stretch', 'Stretched')}.`,
      action: { label: 'Undo', onSelect: () => open.undo() },
    });
    onClose();
  };

  return (
    <Dialog
      open
      onOpenChange={onClose}
      title={`Stretch ${name} to another site`}
      widthPx={560}
      onSubmit={() => void submit()}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={busy} disabled={!answer.ok}>
            Stretch it
          </Button>
        </>
      }
    >
      <CellGrid columns={2}>
        <SelectCell
          label="To"
          value={site}
          options={[
            ...byName(document.sites, elsewhere),
            { value: newSite, label: 'a new site', disabled: transports.length === 0 },
          ]}
          onChange={setSite}
        />
        {leavesChoice ? (
          <SelectCell
            label="Joined to"
            value={from ?? ''}
            placeholder="Choose the site"
            options={byName(
              document.sites,
              shape.choices.filter((id) => id !== site),
            )}
            error={problemAt(problems, 'from', 'Joined to')}
            onChange={setFrom}
          />
        ) : (
          <ReadCell label="Joined to">{shapeWords(document, shape)}</ReadCell>
        )}
        {site === newSite && (
          <>
            <CommitCell
              label="Name"
              value={plan.name}
              placeholder="such as Fennel Quay"
              error={problemAt(problems, 'site.name', 'Name')}
              onCommit={(text) => setPlan({ ...plan, name: text })}
            />
            <SelectCell
              label="Gateway"
              value={plan.gateway}
              options={gateways}
              onChange={(gateway) => setPlan({ ...plan, gateway })}
            />
          </>
        )}
      </CellGrid>
      {site === newSite && (
        <CellGrid columns={3} className="-mt-px">
          <LandingCells
            landing={plan.landings[0]!}
            transports={transports}
            error={problemAt(problems, 'site.landings.0.transport', 'Lands on')}
            addressError={problemAt(problems, 'site.landings.0.address', 'Outside address')}
            onChange={(landing: LandingPlan) => setPlan({ ...plan, landings: [landing] })}
          />
        </CellGrid>
      )}
      <CellGrid columns={needsLower ? 2 : 1} className="-mt-px">
        <CheckCell
          label="Sample host"
          checked={sampleHost}
          words={['one there', 'none']}
          onChange={setSampleHost}
        />
        {needsLower && (
          <CheckCell
            label={`Lower ${name} from ${mtu} B to what fits`}
            checked={lowerMtu}
            error={problemAt(problems, 'lowerMtu', 'Lower the MTU')}
            onChange={setLowerMtu}
          />
        )}
      </CellGrid>
      {others.map((problem) => (
        <FieldError key={`${problem.field} ${problem.expected}`}>
          {problemSentence(fieldNames[problem.field] ?? problem.field, problem)}
        </FieldError>
      ))}
      {after !== undefined && (
        <div role="status" className="mt-14 text-base">
          <p className="flex flex-wrap items-center gap-x-16 gap-y-4">
            <span>Adds {added(document, after)}.</span>
            <SeverityCounts
              counts={countBySeverity(found)}
              worded
              clear={findings.length === 0 ? `All ${rules.length} checks pass` : 'No new finding'}
            />
          </p>
          {found.map(({ key: id, severity, sentence }) => (
            <p key={id} className="mt-4 flex items-start gap-6 text-ink-2">
              <span className="mt-2">
                <SeverityShape severity={severity} size={12} />
              </span>
              {sentence}
            </p>
          ))}
        </div>
      )}
      {failure !== undefined && <ErrorNotice className="mt-14">{failure}</ErrorNotice>}
    </Dialog>
  );
}
