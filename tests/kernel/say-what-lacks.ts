import { ipsecLack, kernelLack } from './kernel-lack.ts';
import { removeLeftovers } from './namespaces.ts';

/** Says before any test why some are going to be skipped; namespaces of earlier runs that were killed are removed. */
export const setup = async (): Promise<void> => {
  if (kernelLack !== undefined) console.error(`Skipping every comparison with the kernel: ${kernelLack}.`);
  else {
    await removeLeftovers();
    if (ipsecLack !== undefined) console.error(`Skipping every comparison with IPsec: ${ipsecLack}.`);
  }
};
