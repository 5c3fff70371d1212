import { describe, expect, test } from 'vitest';
import { route } from '#drawing/routing/route.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { fixesFor } from '#engine/rules/fixes-for.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import {
  demoDesign,
  largerDemoDesigns,
  smallerDemoDesigns,
} from '../../../seeds/demo-designs/demo-design.ts';
import { plantedFaults } from '../../../seeds/demo-designs/planted-faults.ts';

const faultFree = demoDesign('fault-free');
const planted = demoDesign('planted-faults');
const larger = largerDemoDesigns();
const rulesOf = (design: typeof planted): readonly string[] => runRules(design).map(({ rule }) => rule);

describe('the fault-free demo', () => {
  test('is a design, laid out, in which the checks find nothing', () => {
    expect(parseDesign(faultFree)).toEqual({ ok: true, value: faultFree });
    expect(runRules(faultFree)).toEqual([]);
    expect(Object.keys(faultFree.layout.devices ?? {}).sort()).toEqual(Object.keys(faultFree.devices).sort());
  });

  test('is the same each time', () => {
    expect(demoDesign('fault-free')).toEqual(faultFree);
  });

  test('uses one VNI for each tunnel', () => {
    const vnis = Object.values(faultFree.tunnels).map(({ a }) => a.vni);
    expect(vnis).toHaveLength(7);
    expect(new Set(vnis).size).toBe(7);
    for (const { a, b } of Object.values(faultFree.tunnels)) expect(a.vni).toBe(b.vni);
  });

  test('holds no address that could be somebody’s', () => {
    // RFC 5737 section 3 (documentation) and RFC 1918 section 3 (private).
    const harmless = /^(192\.0\.2|198\.51\.100|203\.0\.113|10\.\d+\.\d+)\.\d+$/;
    const addresses = JSON.stringify([faultFree, planted, ...smallerDemoDesigns(), ...larger]).match(
      /\b\d+\.\d+\.\d+\.\d+\b/g,
    );
    expect(addresses!.length).toBeGreaterThan(30);
    expect(addresses!.filter((address) => !harmless.test(address))).toEqual([]);
  });
});

describe('the demo with planted faults', () => {
  test('is a design', () => {
    expect(parseDesign(planted)).toEqual({ ok: true, value: planted });
  });

  test.each(plantedFaults)('alone: $what', ({ rule, patch }) => {
    const faulty = applyPatch(faultFree, patch(faultFree));
    expect(parseDesign(faulty)).toMatchObject({ ok: true });
    expect(rulesOf(faulty)).toEqual([rule]);
  });

  test('has each planted fault found once, and nothing else', () => {
    expect(plantedFaults.length).toBeGreaterThanOrEqual(12);
    expect([...rulesOf(planted)].sort()).toEqual(plantedFaults.map(({ rule }) => rule).sort());
  });

  test('can be cured: some fix for every finding, until none is left', () => {
    let design = planted;
    for (let round = 0; round < 2 * plantedFaults.length; round += 1) {
      const fix = runRules(design)
        .map((finding) => fixesFor(design, finding)[0])
        .find((each) => each !== undefined);
      if (fix === undefined) break;
      design = applyPatch(design, fix.patch);
      expect(parseDesign(design)).toMatchObject({ ok: true });
    }
    expect(runRules(design)).toEqual([]);
  });
});

describe('the smaller demo designs', () => {
  test('have the findings that their list shows, and no others', () => {
    const found = smallerDemoDesigns().map((design) => [design.meta.title, rulesOf(design)]);
    expect(found).toEqual([
      ['CCTV over Coastal access', ['tunnel-bare-on-untrusted']],
      ['Skerry standby controller', []],
      ['Ring terminals, ticketing', []],
    ]);
    for (const design of smallerDemoDesigns())
      expect(parseDesign(design)).toEqual({ ok: true, value: design });
  });
});

describe('the larger demo designs', () => {
  const [stages, meshed] = larger;

  test('are designs, laid out on one sheet, in which the checks find nothing', () => {
    for (const design of larger) {
      expect(parseDesign(design)).toEqual({ ok: true, value: design });
      expect(rulesOf(design)).toEqual([]);
      expect(Object.keys(design.layout.devices ?? {}).sort()).toEqual(Object.keys(design.devices).sort());
      expect(route(design).crowded.filter(({ what }) => what !== 'text')).toEqual([]);
    }
  });

  test('are a hub of sixty stages, folded up, and a mesh in which each of eight is joined to each', () => {
    expect(Object.keys(stages!.sites)).toHaveLength(61);
    expect(Object.keys(stages!.associations)).toHaveLength(60);
    expect(route(stages!).trunks.length).toBeGreaterThan(0);
    expect(Object.values(stages!.layout.sites ?? {}).filter(({ collapsed }) => collapsed)).toHaveLength(60);
    expect(Object.keys(meshed!.sites)).toHaveLength(8);
    expect(Object.keys(meshed!.associations)).toHaveLength(28);
  });
});
