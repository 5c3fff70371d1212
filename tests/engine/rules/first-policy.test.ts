import { describe, expect, it } from 'vitest';
import { protocols } from '#engine/model/intent.ts';
import { firstPolicy } from '#engine/rules/first-policy.ts';
import { arpFrames, passesAll, passesProtocol } from '#engine/rules/protocol-frames.ts';
import { filtered } from '../../support/cross-connect.ts';
import { changed } from '../../support/rule-tester.ts';

describe('the first policy of a cross-connect', () => {
  it.each(protocols.filter((protocol) => protocol !== 'real-time-ethernet'))(
    'lets %s through where the segment needs it',
    (protocol) => {
      const design = filtered([], { protocols: [protocol] });
      const policy = firstPolicy(design, ['a']);
      const written = changed(design, { forwarders: { 'br-s1-a': { policy } } });
      expect(passesProtocol(written.forwarders['br-s1-a']!.policy, protocol)).toBe(true);
      expect(passesAll(written.forwarders['br-s1-a']!.policy, arpFrames)).toBe(true);
    },
  );

  it('lets nothing through that the segment does not need', () => {
    const design = filtered([], { protocols: ['ipv4'] });
    const written = changed(design, { forwarders: { 'br-s1-a': { policy: firstPolicy(design, ['a']) } } });
    const passed = protocols.filter((each) => passesProtocol(written.forwarders['br-s1-a']!.policy, each));
    expect(passed).toEqual(['ipv4', 'bfd']);
  });
});
