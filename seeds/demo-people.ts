import type { Role } from '#contract/session.ts';

/** In the README: the demo is for trying out, on one's own machine. */
const demoPassword = 'saltmarsh-low-tide';

/** The planners of the demo, one for each role. Invented. */
export const demoPeople: readonly {
  readonly role: Role;
  readonly name: string;
  readonly email: string;
  readonly password: string;
}[] = [
  { role: 'owner', name: 'Mara Tadese', email: 'm.tadese@ternwick.example', password: demoPassword },
  { role: 'architect', name: 'Rosa Halloran', email: 'r.halloran@ternwick.example', password: demoPassword },
  { role: 'reviewer', name: 'Noor Okafor', email: 'n.okafor@ternwick.example', password: demoPassword },
  { role: 'presales', name: 'Jon Lindqvist', email: 'j.lindqvist@ternwick.example', password: demoPassword },
  { role: 'installer', name: 'Ines Marlow', email: 'i.marlow@ternwick.example', password: demoPassword },
];
