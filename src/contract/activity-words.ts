import type { Activity, ActivityAction } from './activity.ts';

/** A sentence in three pieces, the middle one being what it was done to. */
export interface ActivitySentence {
  readonly before: string;
  readonly object: string;
  readonly after: string;
}

type Said = Pick<Activity, 'action' | 'person' | 'object' | 'design' | 'details'>;

/** What somebody did, in plain words, such as 'Noor Okafor approved revision C of Terminals stretch'. */
export function activitySentence(activity: Said): ActivitySentence {
  const { person, object, action } = activity;
  // Who joins or leaves is whom the sentence is about.
  const isOneself = action === 'person.joined' || action === 'person.left';
  const who = person?.name ?? (action === 'share.opened' ? 'A guest' : 'The server');
  const [before, after = ''] = words[action](activity);
  return { before: isOneself ? before : `${who} ${before}`, object: object.name, after };
}

export function sentenceText(activity: Said): string {
  const { before, object, after } = activitySentence(activity);
  return `${before}${object}${after}`;
}

/** What is worth knowing beside the sentence, such as the reason of a waiver; '' where nothing is. */
export function activityNote({ details }: Said): string {
  const { reason, expiresOn, on } = details;
  return [
    ...(reason === undefined ? [] : [reason]),
    ...(expiresOn === undefined ? [] : [`Until ${expiresOn}`]),
    ...(on === undefined ? [] : [`On ${on}`]),
  ].join(' · ');
}

/** What each action is called where it is chosen from. */
export const activityActionWords: Readonly<Record<ActivityAction, string>> = {
  'engagement.created': 'Engagement started',
  'engagement.changed': 'Engagement changed',
  'design.created': 'Design started',
  'design.archived': 'Design archived',
  'design.restored': 'Design restored',
  'design.deleted': 'Design deleted',
  'finding.waived': 'Finding waived',
  'waiver.withdrawn': 'Waiver withdrawn',
  'pools.changed': 'Pools changed',
  'profile.changed': 'Equipment profile changed',
  'review.asked': 'Review asked for',
  'review.withdrawn': 'Review taken back',
  'review.approved': 'Revision approved',
  'review.sent-back': 'Revision sent back',
  'design.built': 'Revision built',
  'design.superseded': 'Revision superseded',
  'revision.restored': 'Older state restored',
  'comment.written': 'Comment written',
  'comment.resolved': 'Thread resolved',
  'comment.reopened': 'Thread reopened',
  'suggestion.applied': 'Suggestion applied',
  'share.created': 'Link shared',
  'share.revoked': 'Link revoked',
  'share.opened': 'Link opened',
  'person.invited': 'Person invited',
  'invitation.revoked': 'Invitation taken back',
  'person.joined': 'Person joined',
  'person.role-changed': 'Role changed',
  'person.removed': 'Person removed',
  'person.left': 'Person left',
  'workspace.created': 'Workspace started',
  'workspace.changed': 'Workspace settings changed',
  'workspace.exported': 'Workspace exported',
};

type Pieces = readonly [before: string, after?: string];

const revisionOf = ({ details }: Said): string =>
  details['revision'] === undefined ? '' : `revision ${details['revision']} of `;
const inDesign = ({ details, design, object }: Said): string => {
  const title = details['design'] ?? design?.title;
  return title === undefined || title === object.name ? '' : ` in ${title}`;
};
const shared = ({ details }: Said): string =>
  `revision ${details['revision'] ?? ''} of ${details['design'] ?? 'a design'}`;
const asRole = (role: string | undefined): string => (role === undefined ? '' : ` as ${role}`);
const putAway = (archived: string | undefined): string =>
  archived === undefined ? 'changed' : archived === 'yes' ? 'archived' : 'restored';

const words: { readonly [action in ActivityAction]: (activity: Said) => Pieces } = {
  'engagement.created': () => ['started the engagement '],
  'engagement.changed': ({ details: { nameBefore, archived, summary } }) => {
    if (nameBefore === undefined)
      return summary !== undefined && archived === undefined
        ? ['changed the summary of the engagement ']
        : [`${putAway(archived)} the engagement `];
    const also = archived === undefined ? '' : ` and ${putAway(archived)} it`;
    return [`renamed the engagement ${nameBefore} to `, also];
  },
  'design.created': ({ details: { engagement } }) => [
    'started the design ',
    engagement === undefined ? '' : ` in ${engagement}`,
  ],
  'design.archived': () => ['archived the design '],
  'design.restored': () => ['restored the design '],
  'design.deleted': () => ['deleted the design '],
  'finding.waived': (activity) => ['waived “', `”${inDesign(activity)}`],
  'waiver.withdrawn': (activity) => ['withdrew the waiver of “', `”${inDesign(activity)}`],
  'pools.changed': () => ['changed the workspace’s pools of '],
  'profile.changed': ({ details: { made, archived } }) => [
    `${made === undefined ? putAway(archived) : 'added'} the equipment profile `,
  ],
  'review.asked': (activity) => [`asked for a review of ${revisionOf(activity)}`],
  'review.withdrawn': (activity) => [`took back the question for a review of ${revisionOf(activity)}`],
  'review.approved': (activity) => [`approved ${revisionOf(activity)}`],
  'review.sent-back': (activity) => [`sent back ${revisionOf(activity)}`],
  'design.built': (activity) => [`marked as built ${revisionOf(activity)}`],
  'design.superseded': (activity) => [
    `superseded ${revisionOf(activity)}`,
    activity.details['by'] === undefined ? '' : ` by revision ${activity.details['by']}`,
  ],
  'revision.restored': ({ details: { revision, patch } }) => [
    'put ',
    revision === undefined ? ` back to what it was at edit ${patch ?? ''}` : ` back to revision ${revision}`,
  ],
  'comment.written': (activity) => ['commented on ', inDesign(activity)],
  'comment.resolved': (activity) => ['resolved the thread on ', inDesign(activity)],
  'comment.reopened': (activity) => ['reopened the thread on ', inDesign(activity)],
  'suggestion.applied': (activity) => ['applied a suggestion on ', inDesign(activity)],
  'share.created': (activity) => [`shared ${shared(activity)} by the link “`, '”'],
  'share.revoked': (activity) => ['revoked the link “', `” to ${shared(activity)}`],
  'share.opened': (activity) => ['opened the link “', `” to ${shared(activity)}`],
  'person.invited': ({ details: { role } }) => ['invited ', asRole(role)],
  'invitation.revoked': () => ['took back the invitation of '],
  'person.joined': ({ details: { role } }) => ['', ` joined the workspace${asRole(role)}`],
  'person.role-changed': ({ details: { from, to } }) => [
    'changed the role of ',
    ` from ${from ?? '?'} to ${to ?? '?'}`,
  ],
  'person.removed': () => ['removed ', ' from the workspace'],
  'person.left': () => ['', ' left the workspace'],
  'workspace.created': () => ['started the workspace '],
  'workspace.changed': ({ details: { nameBefore, twoStep } }) => {
    const asked = twoStep === undefined ? '' : `made two-step sign-in ${twoStep} in `;
    if (nameBefore === undefined) return [asked === '' ? 'changed the settings of ' : asked];
    const also = twoStep === undefined ? '' : `, where two-step sign-in is ${twoStep} from then on`;
    return [`renamed the workspace ${nameBefore} to `, also];
  },
  'workspace.exported': () => ['exported the workspace '],
};
