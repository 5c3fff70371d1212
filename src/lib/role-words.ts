import type { Role } from '../contract/session.ts';

export const roleWords: Readonly<Record<Role, string>> = {
  owner: 'Owner',
  architect: 'Architect',
  reviewer: 'Reviewer',
  presales: 'Presales',
  installer: 'Installer',
};
