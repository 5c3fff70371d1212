import type { ApiError } from '../../lib/api-error.ts';

/** Why a sign-in was refused, in words for whoever typed it. */
export function refusalSentence({ code, message, retryAfterSeconds }: ApiError): string {
  if (code === 'too-many-requests' && retryAfterSeconds !== null) {
    const minutes = Math.ceil(retryAfterSeconds / 60);
    return `Too many tries. Wait ${minutes === 1 ? 'a minute' : `${minutes} minutes`}, then try again.`;
  }
  return message;
}
