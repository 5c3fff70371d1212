import type { Draft } from './draft.ts';

/** What every such sheet should say to whoever reads it, unless it has notes already. */
export const addStandingNotes = (draft: Draft): void => {
  if (Object.keys(draft.entries('notes')).length > 0) return;
  const mtus = [...new Set(Object.values(draft.entries('segments')).flatMap(({ mtu }) => mtu ?? []))];
  const least = Math.min(...mtus);
  const texts = [
    `UDP 4789 and outer DF set at both ends.${mtus.length === 0 ? '' : ` Inner IP packets up to ${least} B.`}`,
    ...(Object.keys(draft.entries('associations')).length === 0
      ? []
      : ['Keys and certificates are in the team’s vault. None is written here.']),
    'A stretched segment joins failure domains: a storm or a duplicate address at one site reaches all the others.',
  ];
  texts.forEach((text, i) => draft.add('notes', `note-${i + 1}`, { text, standing: true }));
};
