import type { TrayPart } from '../place-part.ts';

const type = 'application/x-longpatch-part';
const parts: readonly TrayPart[] = [
  'firewall',
  'ha-pair',
  'switch',
  'router',
  'host',
  'endpoint',
  'tunnel',
  'association',
  'site',
  'transport',
  'cable',
  'note',
];

/** Puts a part of the tray on the pointer. */
export const writePartDrag = (transfer: DataTransfer, part: TrayPart): void => {
  transfer.setData(type, part);
  transfer.effectAllowed = 'copy';
};

/** The part that was dropped; undefined when something else was. */
export const readPartDrag = (transfer: DataTransfer): TrayPart | undefined =>
  parts.find((part) => part === transfer.getData(type));
