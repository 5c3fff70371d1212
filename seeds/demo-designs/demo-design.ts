import type { demoDesigns } from '#contract/designs.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { plantFaults } from './planted-faults.ts';
import { camerasOverCoast, ringTerminals, standbyController } from './smaller-designs.ts';
import { landingStages, meshedTerminals } from './stretched-designs.ts';
import { terminalsStretch } from './terminals-stretch.ts';

type DemoDesign = (typeof demoDesigns)[number];

const builders: { readonly [name in DemoDesign]: () => Design } = {
  'fault-free': () => laidOut(terminalsStretch('Terminals stretch, phase 1', 'SMF-L2-004')),
  // Laid out before the faults go in: the two sheets differ by the faults alone. One drawing, so one number.
  'planted-faults': () =>
    plantFaults(laidOut(terminalsStretch('Terminals stretch, with planted faults', 'SMF-L2-004'))),
};

/** One of the two designs of the story, laid out on its sheet. */
export function demoDesign(name: DemoDesign): Design {
  return builders[name]();
}

/** What stands beside them in the demo's list. */
export function smallerDemoDesigns(): readonly Design[] {
  return [camerasOverCoast(), standbyController(), ringTerminals()].map(laidOut);
}

/** What shows how a large plan looks: made by the Stretch assistant from its form. */
export function largerDemoDesigns(): readonly Design[] {
  return [landingStages(), meshedTerminals()].map(laidOut);
}

function laidOut(design: Design): Design {
  return applyPatch(design, tidy(design));
}
