import type { Knex } from 'knex';
import type { OpenedShare, SharedView } from '#contract/shares.ts';
import type { Revision } from '#contract/revisions.ts';
import type { exportLooks } from '#contract/sheet-exports.ts';
import { sheetCount } from '#drawing/sheets/sheet-numbers.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { applyWaivers } from '#engine/rules/waived.ts';
import { hashLinkToken } from '../auth/link-tokens.ts';
import { isPasswordRight } from '../auth/passwords.ts';
import { Refusal } from '../errors.ts';
import { announce } from '../live/announce.ts';
import { queueMail } from '../mail/queue-mail.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign } from '../repositories/designs.ts';
import { findPlace } from '../repositories/memberships.ts';
import { findAccount } from '../repositories/people.ts';
import { findRevision } from '../repositories/revisions.ts';
import type { ShareRow } from '../repositories/shares.ts';
import { countView, findShare } from '../repositories/shares.ts';
import { findWorkspace } from '../repositories/workspaces.ts';
import { dayOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { loadIssued } from './revisions.ts';
import type { DrawnFile } from './sheet-drawing/export-sheet.ts';
import { drawIssued } from './sheet-drawing/export-sheet.ts';
import { withoutWrittenAddresses, withQuietNotes } from './written-addresses.ts';

/** What a guest has in hand. */
export interface ShareKey {
  readonly token: string;
  readonly passphrase?: string | undefined;
}

/** Counts guesses at a passphrase; taken back once it is found. */
export interface PassphraseGuesses {
  attempt(shareId: string): Promise<void>;
  found(shareId: string): Promise<void>;
}

/** What a link shows to whoever has it, counted as one view. Locked while a passphrase is still to come. */
export async function openShare(
  context: Context,
  key: ShareKey,
  guesses: PassphraseGuesses,
): Promise<OpenedShare> {
  const { knex } = context.database;
  const unlocked = await unlock(context, key, guesses);
  if (unlocked === null) return { isLocked: true };
  const { share, revision, design } = unlocked;
  const workspace = await findWorkspace(knex, design.workspaceId);
  const issued = await shown(knex, share, revision);
  await knex.transaction((trx) => noteView(context, trx, share, design));
  return {
    isLocked: false,
    view: {
      label: share.label,
      workspaceName: workspace?.name ?? '',
      engagementName: design.engagementName,
      ...summaryOf(share, revision, issued.document),
      findings: share.showsFindings ? findingsOf(issued) : null,
    },
  };
}

/** One sheet of what a link shows. */
export async function drawShared(
  context: Context,
  key: ShareKey,
  guesses: PassphraseGuesses,
  {
    look,
    sheet,
    signal,
  }: {
    readonly look: (typeof exportLooks)[number];
    readonly sheet?: number | undefined;
    readonly signal: AbortSignal;
  },
): Promise<DrawnFile> {
  const unlocked = await unlock(context, key, guesses);
  if (unlocked === null)
    throw new Refusal('wrong-credentials', 'This link asks for a passphrase; send it along.');
  const { share, revision } = unlocked;
  return drawIssued(context, await shown(context.database.knex, share, revision), {
    format: 'svg',
    query: {
      look,
      findings: share.showsFindings,
      addresses: share.showsAddresses,
      layers: ['cabling', 'underlay', 'overlay'],
      ...(sheet === undefined ? {} : { sheet }),
    },
    signal,
  });
}

type Unlocked = { readonly share: ShareRow; readonly revision: Revision; readonly design: DesignRow };

/** The share that a key opens, or null while its passphrase is missing. */
async function unlock(
  { database: { knex }, clock }: Context,
  { token, passphrase }: ShareKey,
  guesses: PassphraseGuesses,
): Promise<Unlocked | null> {
  const share = await findShare(knex, { token_hash: hashLinkToken(token) });
  const revision = share === null ? null : await findRevision(knex, share.revisionId);
  const design = share === null ? null : await findDesign(knex, share.designId);
  const isOver =
    share === null ||
    share.revokedAt !== null ||
    share.expiresOn < dayOf(clock()) ||
    revision === null ||
    revision.state === 'withdrawn' ||
    revision.state === 'sent-back' ||
    design === null ||
    design.deletedAt !== null;
  if (isOver)
    throw new Refusal(
      'not-found',
      'This link opens nothing any more: it has ended, was taken back, or is not whole. Ask whoever sent it for a new one.',
    );
  if (share.passphraseHash !== null) {
    if (passphrase === undefined) return null;
    await guesses.attempt(share.id);
    if (!(await isPasswordRight(share.passphraseHash, passphrase)))
      throw new Refusal('wrong-credentials', 'That is not the passphrase of this link.');
    await guesses.found(share.id);
  }
  return { share, revision, design };
}

type Issued = Awaited<ReturnType<typeof loadIssued>>;

/** The revision with what the sharer left out gone from every text. */
async function shown(knex: Knex, share: ShareRow, revision: Revision): Promise<Issued> {
  const issued = await loadIssued(knex, revision);
  if (share.showsAddresses) return issued;
  return {
    document: withQuietNotes(issued.document),
    findings: issued.findings.map((finding) => ({
      ...finding,
      sentence: withoutWrittenAddresses(finding.sentence),
    })),
    waivers: issued.waivers.map((waiver) => ({
      ...waiver,
      sentence: withoutWrittenAddresses(waiver.sentence),
      reason: withoutWrittenAddresses(waiver.reason),
    })),
  };
}

function summaryOf(
  share: ShareRow,
  { label, state, decidedBy, decidedAt }: Revision,
  document: Design,
): Omit<SharedView, 'label' | 'workspaceName' | 'engagementName' | 'findings'> {
  const { showsAddresses, showsFindings, expiresOn } = share;
  const carried = tunnelSegments(indexNetwork(document));
  const isApproved = state !== 'in-review' && decidedBy !== null;
  return {
    title: document.meta.title,
    identification: document.meta.identification ?? null,
    revision: label,
    state,
    approvedBy: isApproved ? decidedBy.name : null,
    dateOfIssue: isApproved ? (decidedAt?.slice(0, 10) ?? null) : null,
    expiresOn,
    sheets: sheetCount(document),
    sites: Object.values(document.sites).map(({ name }) => name),
    transports: Object.values(document.transports).map(({ name, trusted = false }) => ({ name, trusted })),
    segments: Object.entries(document.segments).map(([id, segment]) => {
      const tunnels = Object.entries(document.tunnels).filter(([tunnel]) =>
        carried.get(tunnel)?.includes(id),
      );
      return {
        name: segment.name,
        subnets: showsAddresses
          ? [...new Set(Object.values(segment.sites).flatMap(({ subnets = [] }) => subnets))]
          : [],
        sites: Object.keys(segment.sites).flatMap((site) => document.sites[site]?.name ?? []),
        tunnels: tunnels.length,
        protected: tunnels.filter(([, { association }]) => association !== undefined).length,
      };
    }),
    leftOut: [
      ...(showsAddresses ? [] : (['addresses'] as const)),
      ...(showsFindings ? [] : (['findings'] as const)),
    ],
  };
}

function findingsOf({ findings, waivers }: Issued): SharedView['findings'] {
  // No day is past for what held when it was frozen.
  const { open, covered } = applyWaivers(findings, waivers, '');
  const count = (severity: string): number => open.filter((each) => each.severity === severity).length;
  return {
    counts: {
      blocking: count('blocking'),
      degrading: count('degrading'),
      advisory: count('advisory'),
    },
    open: open.map(({ severity, sentence }) => ({ severity, sentence })),
    waived: covered.map(({ finding, waiver }) => ({
      sentence: finding.sentence,
      reason: waiver.reason,
      expiresOn: waiver.expiresOn,
    })),
  };
}

async function noteView(
  { clock, publicUrl }: Context,
  trx: Knex.Transaction,
  share: ShareRow,
  design: DesignRow,
): Promise<void> {
  const at = clock();
  await countView(trx, share.id, at);
  await recordActivity(trx, {
    workspaceId: design.workspaceId,
    at,
    action: 'share.opened',
    personId: null,
    object: { kind: 'share', id: share.id, name: share.label },
    designId: design.id,
    details: { design: design.title, revision: share.revisionLabel },
  });
  await announce(trx, { designId: design.id, change: 'shares' });
  const maker = share.tellsMaker && share.makerId !== null ? await findAccount(trx, share.makerId) : null;
  // Whoever left the workspace is told no more of it.
  if (maker === null || (await findPlace(trx, design.workspaceId, maker.id)) === null) return;
  await queueMail(trx, {
    kind: 'share-opened',
    workspaceId: design.workspaceId,
    to: { email: maker.email, name: maker.name, personId: maker.id },
    designTitle: design.title,
    label: share.label,
    link: `${publicUrl}/designs/${design.id}/shares`,
  });
}
