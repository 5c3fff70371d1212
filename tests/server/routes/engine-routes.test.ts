import supertest from 'supertest';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import {
  checkAnswerSchema,
  loadAnswerSchema,
  outageAnswerSchema,
  rulesAnswerSchema,
  traceAnswerSchema,
} from '#contract/engine.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { Design } from '#engine/model/design.ts';
import { ruleReference } from '#engine/rules/rule-reference.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import { loadOf } from '#engine/load/load-of.ts';
import { outage } from '#engine/outage/outage.ts';
import { computeWire } from '#engine/wire/compute-wire.ts';
import { wireRequestSchema } from '#engine/wire/wire-request.ts';
import { allowances } from '../../../server/auth/throttles.ts';
import { limits } from '../../../server/services/limits.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import type { TestApplication } from '../../support/test-application.ts';
import { startTestApplication, testConfig } from '../../support/test-application.ts';

let application: TestApplication;

beforeAll(async () => {
  application = await startTestApplication();
});
afterAll(() => application.close());
beforeEach(() => application.database.knex('rate_limits').delete());

const post = (path: string, body: unknown) =>
  supertest(application.server).post(path).set('Content-Type', 'application/json').send(JSON.stringify(body));

const faulty = applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_210 } } } });

function withNotes(count: number): Design {
  const notes = Object.fromEntries(Array.from({ length: count }, (_, index) => [`n${index}`, { text: 'x' }]));
  return { ...pairDesign(), notes };
}

describe('checking a design', () => {
  test('answers the engine’s findings without a sign-in, a token or a cookie', async () => {
    const response = await post('/api/engine/check', { design: faulty }).expect(200);
    const answer = checkAnswerSchema.parse(response.body);
    expect(answer.findings).toEqual(JSON.parse(JSON.stringify(runRules(faulty))));
    expect(answer.counts.blocking).toBe(1);
    expect(answer.engineVersion).toMatch(/^\d+\.\d+\.\d+$/);
    expect(response.headers['set-cookie']).toBeUndefined();
  });

  test('adds fixes when they are asked for; each cures its finding', async () => {
    const response = await post('/api/engine/check', { design: faulty, withFixes: true }).expect(200);
    const { findings } = checkAnswerSchema.parse(response.body);
    const mismatch = findings.find(({ rule }) => rule === 'tunnel-vni-mismatch');
    const fixes = mismatch!['fixes'] as { patch: object }[];
    expect(fixes.length).toBeGreaterThan(0);
    const cured = applyPatch(faulty, fixes[0]!.patch as Parameters<typeof applyPatch>[1]);
    expect(runRules(cured).map(({ rule }) => rule)).not.toContain('tunnel-vni-mismatch');
  });

  test('works fixes out for the most severe findings only, and counts them for more', async () => {
    const design = hubDesign(limits.findingsWithFixes + 5);
    const tunnels = Object.fromEntries(
      Object.keys(design.tunnels).map((id, index) => [id, { b: { vni: 20_000 + index } }]),
    );
    const body = { design: applyPatch(design, { tunnels }), withFixes: true };
    const response = await post('/api/engine/check', body).expect(200);
    const { findings } = checkAnswerSchema.parse(response.body);
    expect(findings.length).toBeGreaterThan(limits.findingsWithFixes);
    expect(findings.filter((finding) => 'fixes' in finding)).toEqual(
      findings.slice(0, limits.findingsWithFixes),
    );
    const statuses: number[] = [];
    for (let request = 0; request < 12; request += 1)
      statuses.push((await post('/api/engine/check', { design: pairDesign(), withFixes: true })).status);
    expect(statuses.filter((status) => status === 200)).toHaveLength(11);
    expect(statuses.at(-1)).toBe(429);
  });

  test('names every problem of what is no design', async () => {
    const design = { ...pairDesign(), sites: { s0: { name: '' } }, extra: 1 };
    const response = await post('/api/engine/check', { design }).expect(422);
    const { code, details } = response.body as { code: string; details: { path: string }[] };
    expect(code).toBe('invalid-design');
    expect(details.map(({ path }) => path).sort()).toEqual(['design', 'design.sites.s0.name']);
  });

  test.each([null, 7, 'x', [], {}, { design: null }, { design: [] }, { design: 'x' }, { designs: {} }])(
    'refuses %j',
    async (body) => {
      const response = await post('/api/engine/check', body);
      expect([400, 422]).toContain(response.status);
    },
  );

  test('bounds its work by the number of entries and says so', async () => {
    const refused = await post('/api/engine/check', { design: withNotes(limits.checkedEntries) }).expect(413);
    expect(refused.body).toMatchObject({ code: 'too-large' });
    expect((refused.body as { message: string }).message).toContain(`at most ${limits.checkedEntries}`);
    const many = withNotes(limits.checkedEntriesWithFixes);
    await post('/api/engine/check', { design: many, withFixes: true }).expect(413);
    await post('/api/engine/check', { design: many }).expect(200);
  });

  test('takes no body above its limit', async () => {
    const design = { ...pairDesign(), padding: 'x'.repeat(limits.engineBodyBytes) };
    const response = await post('/api/engine/check', { design }).expect(413);
    expect(response.body).toMatchObject({ code: 'too-large' });
  });
});

describe('listing the checks', () => {
  const answered = async (body: unknown) =>
    rulesAnswerSchema.parse((await post('/api/engine/rules', body).expect(200)).body);

  test('answers the whole catalogue, with what each check says and reads', async () => {
    const answer = await answered({});
    expect(answer.rules).toEqual(JSON.parse(JSON.stringify(ruleReference())));
    expect(answer.counts).toBeUndefined();
    expect(answer.rules.find(({ id }) => id === 'tunnel-vni-mismatch')).toMatchObject({
      severity: 'blocking',
      canFix: true,
      looksAt: expect.arrayContaining(['tunnels']) as string[],
      messages: expect.arrayContaining([expect.objectContaining({ words: 'VNIs differ' })]) as object[],
    });
  });

  test('narrows by severity, by the parts of a design that a check reads, and by id', async () => {
    const blocking = await answered({ severities: ['blocking'] });
    expect(new Set(blocking.rules.map(({ severity }) => severity))).toEqual(new Set(['blocking']));
    const ofDemands = await answered({ collections: ['demands'], severities: ['degrading', 'advisory'] });
    expect(ofDemands.rules.length).toBeGreaterThan(0);
    for (const rule of ofDemands.rules) {
      expect(rule.looksAt).toContain('demands');
      expect(rule.severity).not.toBe('blocking');
    }
    const ids = ['tunnel-vni-mismatch', 'duplicate-name'];
    expect((await answered({ ids })).rules.map(({ id }) => id)).toEqual([...ids].sort());
  });

  test('runs the checks that are left on a design, and says of each what it found', async () => {
    const all = await answered({ design: faulty });
    const found = all.rules.flatMap(({ findings }) => findings!);
    const byKey = (entries: readonly unknown[]) =>
      (JSON.parse(JSON.stringify(entries)) as { key: string }[]).sort((a, b) => (a.key < b.key ? -1 : 1));
    expect(byKey(found)).toEqual(byKey(runRules(faulty)));
    const one = await answered({ design: faulty, ids: ['tunnel-vni-mismatch', 'duplicate-name'] });
    expect(one.counts).toEqual({ blocking: 1, degrading: 0, advisory: 0 });
    expect(one.rules.map(({ id, findings }) => [id, findings!.length])).toEqual([
      ['duplicate-name', 0],
      ['tunnel-vni-mismatch', 1],
    ]);
  });

  test.each([
    [{ ids: ['duplicate-name', 'no-such-check'] }, 'ids.1'],
    [{ ids: [] }, 'ids'],
    [{ severities: ['bad'] }, 'severities.0'],
    [{ collections: ['waivers'] }, 'collections.0'],
    [{ more: 1 }, 'more'],
  ])('refuses %j and names the field', async (body, path) => {
    const response = await post('/api/engine/rules', body).expect(400);
    expect(response.body).toMatchObject({ code: 'invalid-request', details: [{ path }] });
  });

  test('refuses what is no design, and more entries than a check may have', async () => {
    const response = await post('/api/engine/rules', { design: [] }).expect(422);
    expect(response.body).toMatchObject({ code: 'invalid-design' });
    await post('/api/engine/rules', { design: withNotes(limits.checkedEntries) }).expect(413);
  });
});

describe('computing bytes', () => {
  const request = { stack: { vxlanOver: 'ipv4' }, innerPacketBytes: 1500 };

  test('answers as the engine does', async () => {
    const response = await post('/api/engine/wire', request).expect(200);
    const { ok, ...expected } = computeWire(wireRequestSchema.parse(request));
    expect(ok).toBe(true);
    expect(response.body).toEqual({
      engineVersion: expect.any(String) as string,
      ...(JSON.parse(JSON.stringify(expected)) as object),
    });
    // RFC 7348 section 5: 20 bytes of IPv4, 8 of UDP, 8 of VXLAN around the inner frame's 14 + 1500.
    expect(response.body).toMatchObject({
      outward: { totals: { innerPacketBytes: 1500, outerIpPacketBytes: 1550 } },
    });
  });

  test.each([
    [{}, 'stack'],
    [{ stack: {} }, 'innerPacketBytes'],
    [{ stack: { vxlanOver: 'ipv5' }, innerPacketBytes: 1500 }, 'stack.vxlanOver'],
    [{ stack: {}, innerPacketBytes: 1.5 }, 'innerPacketBytes'],
    [{ stack: {}, innerPacketBytes: 1500, more: 1 }, 'more'],
  ])('refuses %j and names the field', async (body, path) => {
    const response = await post('/api/engine/wire', body).expect(400);
    expect(response.body).toMatchObject({ code: 'invalid-request', details: [{ path }] });
  });
});

describe('following a frame', () => {
  const probe = {
    source: { host: 'h-s0-a' },
    destination: { kind: 'host', host: 'h-s1-a' },
    packet: { kind: 'ip', version: 'ipv4', packetBytes: 84 },
  } as const;

  test('answers as the engine does and points at the finding that would have told', async () => {
    const response = await post('/api/engine/trace', { design: faulty, probe }).expect(200);
    const { ok, ...expected } = traceFrame(faulty, probe, { findings: runRules(faulty) });
    expect(ok).toBe(true);
    const answer = traceAnswerSchema.parse(response.body);
    expect(response.body).toEqual({
      engineVersion: answer.engineVersion,
      ...(JSON.parse(JSON.stringify(expected)) as object),
    });
    expect(answer.steps.at(-1)).toMatchObject({
      verdict: {
        reason: { code: 'no-such-vni', sent: 10_000, has: 10_210 },
        explains: [{ rule: 'tunnel-vni-mismatch', key: expect.any(String) as string }],
      },
    });
  });

  test.each([
    [{ ...probe, source: { host: 'h-nowhere' } }, 'probe.source.host'],
    [{ ...probe, packet: { ...probe.packet, packetBytes: 19 } }, 'probe.packet.packetBytes'],
    [{ ...probe, hops: 3 }, 'probe.hops'],
  ])('refuses %j and names the field', async (wrong, path) => {
    const response = await post('/api/engine/trace', { design: faulty, probe: wrong }).expect(400);
    expect(response.body).toMatchObject({ code: 'invalid-request', details: [{ path }] });
  });

  test('names the problems of what is no design', async () => {
    const response = await post('/api/engine/trace', { design: {}, probe }).expect(422);
    expect(response.body).toMatchObject({ code: 'invalid-design' });
  });
});

describe('following what a design carries and what it loses', () => {
  const busy = applyPatch(pairDesign(), {
    demands: {
      d: {
        segment: 'a',
        from: { site: 's0' },
        to: { site: 's1' },
        forwardBps: 50_000_000,
        reverseBps: 5_000_000,
        mix: [{ packetBytes: 1396, weight: 1 }],
        flows: 2,
      },
    },
  });
  const failed = [{ collection: 'tunnels' as const, id: 'tn-s0-s1-a' }];
  const asSent = (answer: { readonly ok: boolean }): object => {
    const { ok, ...rest } = answer;
    expect(ok).toBe(true);
    return JSON.parse(JSON.stringify(rest)) as object;
  };

  test('answers the load as the engine does', async () => {
    const response = await post('/api/engine/load', { design: busy, multiplier: 2 }).expect(200);
    const { engineVersion, ...report } = response.body as { engineVersion: string };
    expect(engineVersion).toMatch(/^\d+\.\d+\.\d+$/);
    expect(report).toEqual(asSent(loadOf(busy, { multiplier: 2 })));
    expect(loadAnswerSchema.parse(response.body).limits.length).toBeGreaterThan(0);
  });

  test('answers an outage as the engine does', async () => {
    const response = await post('/api/engine/outage', { design: busy, failed, pairs: true }).expect(200);
    const { engineVersion: _version, ...report } = response.body as { engineVersion: string };
    expect(report).toEqual(asSent(outage(busy, failed, { pairs: true })));
    expect(outageAnswerSchema.parse(response.body).pairCount).toBe(1);
  });

  test.each([
    ['/api/engine/load', { multiplier: -1 }, 'multiplier'],
    ['/api/engine/load', { windowBytes: 0.5 }, 'windowBytes'],
    ['/api/engine/outage', { failed: [] }, 'failed'],
    ['/api/engine/outage', { failed: [{ collection: 'tunnels', id: 'none' }] }, 'failed.0.id'],
    ['/api/engine/outage', { failed: [{ collection: 'segments', id: 'a' }] }, 'failed.0.collection'],
  ])('refuses at %s %j and names the field', async (path, more, field) => {
    const response = await post(path, { design: busy, ...more }).expect(400);
    expect(response.body).toMatchObject({ code: 'invalid-request', details: [{ path: field }] });
  });

  test('bounds its work by the number of entries', async () => {
    const many = withNotes(limits.followedEntriesWithPairs);
    await post('/api/engine/outage', { design: many, failed, pairs: true }).expect(413);
    await post('/api/engine/outage', { design: many, failed }).expect(200);
    await post('/api/engine/load', { design: withNotes(limits.followedEntries) }).expect(413);
  });
});

describe('the throttle on the engine', () => {
  test('counts by address, and believes a proxy only where there is one', async () => {
    const { times } = allowances.engineRequest;
    const behindProxy = await application.another({
      config: { ...testConfig, publicUrl: 'https://plan.ternwick.example' },
    });
    const ask = (address: string, server = application.server) =>
      supertest(server).post('/api/engine/wire').set('X-Forwarded-For', address).send({});
    await application.database.knex('rate_limits').delete();
    for (let count = 0; count < times; count += 1) await ask(`192.0.2.${count % 250}`).expect(400);
    const refused = await ask('198.51.100.1').expect(429);
    expect(refused.body).toMatchObject({ code: 'too-many-requests' });
    await ask('198.51.100.1', behindProxy.server).expect(400);
  });
});
