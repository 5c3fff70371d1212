import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { dayByUtc } from '../lib/format-time.ts';
import { useNow } from '../lib/use-now.ts';
import { ChecksProvider } from './checks-context.tsx';
import { designContextQuery } from './design-context-query.ts';
import { useDesignPlace } from './design-place.tsx';
import { waiversQuery } from './waivers-query.ts';

/**
 * The checks of a design that the server keeps, with what the server knows beyond the document. Until that is there, and
 * should it not be reached, they run without.
 */
export function StoredChecks({ children }: { readonly children: ReactNode }) {
  const { designId } = useDesignPlace();
  const context = useQuery(designContextQuery(designId));
  const waivers = useQuery(waiversQuery(designId));
  return (
    <ChecksProvider numbering={context.data?.context} waivers={waivers.data} today={dayByUtc(useNow())}>
      {children}
    </ChecksProvider>
  );
}
