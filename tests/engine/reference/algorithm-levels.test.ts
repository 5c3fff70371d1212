import { describe, expect, it } from 'vitest';
import {
  espEncryptionLevels,
  espIntegrityLevels,
  ikeEncryptionLevels,
  ikeIntegrityLevels,
  ikePrfLevels,
  keyExchangeGroupLevels,
  type AlgorithmLevel,
} from '#engine/reference/algorithm-levels.ts';
import { espIntegrityIds, espTransformIds } from '#engine/reference/esp.ts';
import { keyExchangeGroupNames } from '#engine/reference/key-exchange-groups.ts';
import { espEncryptions, integrities, keyExchangeGroups } from '#engine/model/overlay.ts';
import published from '../../reference/algorithm-levels.json' with { type: 'json' };

/** A level in the words of the documents. */
function asPrinted({ level, trend, onlyForSmallDevices }: AlgorithmLevel): string {
  const sign = trend === undefined ? '' : trend === 'rising' ? '+' : '-';
  return `${level.replace('-', ' ').toUpperCase()}${sign}${onlyForSmallDevices ? ' (IoT)' : ''}`;
}

describe('requirement levels', () => {
  it.each([
    ['ESP encryption', espEncryptionLevels, published.espEncryption],
    ['ESP integrity', espIntegrityLevels, published.espIntegrity],
    ['IKE encryption', ikeEncryptionLevels, published.ikeEncryption],
    ['IKE PRF', ikePrfLevels, published.ikePrf],
    ['IKE integrity', ikeIntegrityLevels, published.ikeIntegrity],
    ['key-exchange groups', keyExchangeGroupLevels, published.keyExchangeGroups],
  ] as const)('of %s are those that the documents print', (_, ours, theirs) => {
    const printed = Object.entries(ours).map(([id, level]) => [id, asPrinted(level)]);
    expect(Object.fromEntries(printed)).toEqual(theirs);
  });
});

describe('an algorithm that a design may name', () => {
  it('has known sizes', () => {
    expect([...espTransformIds].sort()).toEqual([...espEncryptions].sort());
    expect([...espIntegrityIds].sort()).toEqual([...integrities].sort());
  });

  it('or a key-exchange group has a name', () => {
    expect(Object.keys(keyExchangeGroupNames).map(Number).sort()).toEqual([...keyExchangeGroups].sort());
  });
});
