import { describe, expect, test } from 'vitest';
import { profileSchema, type Profile } from '../../src/engine/model/underlay.ts';
import { draftOf, emptyDraft, readDraft, sameDraft } from '../../src/features/profiles/profile-draft.ts';
import { fieldKey, profileFields } from '../../src/features/profiles/profile-fields.ts';
import { demoProfiles } from '../../seeds/demo-profiles.ts';

describe('a draft of a profile', () => {
  test.each(
    Object.values(demoProfiles).map((profile): readonly [string, Profile] => [profile.name, profile]),
  )('reads back what was written: %s', (_name, profile) => {
    expect(readDraft(draftOf(profile))).toEqual({ ok: true, profile });
  });

  test('has a field, with words about it, for everything that a profile can say', () => {
    const everything: Required<Profile> = {
      name: 'All',
      basis: 'Bench',
      vniScope: 'peer',
      plain: { oneFlowBps: 1, manyFlowsBps: 2, packetsPerSecond: 3 },
      encrypted: { oneFlowBps: 4, manyFlowsBps: 5, packetsPerSecond: 6 },
      encryption: 'cpu',
      cpuWhen: 'Fragments',
      reservedGroups: { '0e': 'pass' },
      multicastTtl: 'kept',
      oversizeDf: 'icmp',
      macTable: 7,
      hmacSha256Bits: 96,
    };
    expect(Object.keys(everything).sort()).toEqual(Object.keys(profileSchema.shape).sort());
    expect(readDraft(draftOf(everything))).toEqual({ ok: true, profile: everything });
    for (const field of profileFields) expect([fieldKey(field), field.about]).not.toContain('');
  });

  test('takes rates with their unit and numbers as people type them', () => {
    const typed = {
      ...emptyDraft,
      name: ' Branch ',
      'encrypted.oneFlowBps': '180M',
      'encrypted.packetsPerSecond': '45000',
    };
    expect(readDraft(typed)).toEqual({
      ok: true,
      profile: { name: 'Branch', encrypted: { oneFlowBps: 180_000_000, packetsPerSecond: 45_000 } },
    });
  });

  test.each([
    [{}, 'name', 'Name is empty: it has to be given.'],
    [
      { name: 'A', 'plain.oneFlowBps': '180' },
      'plain.oneFlowBps',
      'One flow 180 does not fit: add the unit, such as 180 Mbit/s.',
    ],
    [
      { name: 'A', 'plain.manyFlowsBps': '90T' },
      'plain.manyFlowsBps',
      'Many flows 90T does not fit: type at most 10 Tbit/s.',
    ],
    [
      { name: 'A', macTable: 'lots' },
      'macTable',
      'MAC table lots does not fit: type a whole number, digits only.',
    ],
  ])('refuses %j with the field, the value and the way out', (texts, key, sentence) => {
    const read = readDraft({ ...emptyDraft, ...texts });
    expect(read).toMatchObject({ ok: false, problems: { [key]: sentence } });
  });

  test('is the same as another whatever spaces stand around', () => {
    expect(sameDraft({ ...emptyDraft, name: 'A' }, { ...emptyDraft, name: ' A ' })).toBe(true);
    expect(sameDraft({ ...emptyDraft, name: 'A' }, { ...emptyDraft, name: 'B' })).toBe(false);
  });
});
