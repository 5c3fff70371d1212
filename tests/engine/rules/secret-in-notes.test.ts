import { secretInNotes } from '#engine/rules/secret-in-notes.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign();
const [associationId] = Object.keys(pair.associations);
const withNotes = (notes: string) => changed(pair, { associations: { [associationId!]: { notes } } });
const name = pair.associations[associationId!]!.name;
const gist = 'what looks like a key or password; change that key, and keep the new one elsewhere';

testRule(secretInNotes, {
  accepted: {
    'no notes': pair,
    'the name under which a key is kept': withNotes('PSK: vault/saltmarsh/head-office-gullhaven'),
    'a serial number and a circuit': withNotes(
      'Serial 0042-1187, circuit OP-88123, see https://wiki.example/a/B7',
    ),
  },
  rejected: {
    'a pre-shared key': {
      design: withNotes('PSK: Tide7-Harbour!22 until March'),
      findings: [
        {
          sentence: `The notes of ${name} hold ${gist}`,
          words: 'Key in note',
          severity: 'degrading',
          elements: [`associations/${associationId}`],
          properties: [`associations/${associationId}: notes`],
          fixes: ['Take it out of the note'],
        },
      ],
    },
    'key material on the sheet': {
      design: changed(pair, { notes: { n1: { text: 'Key 9f86d081884c7d659a2feaa0c55ad015' } } }),
      findings: [
        {
          sentence: `A note on the sheet holds ${gist}`,
          properties: ['notes/n1: text'],
          fixes: ['Take it out of the note'],
        },
      ],
    },
  },
});
