import { asApiError } from './api-error.ts';

export interface ProofProblems {
  readonly password?: string;
  readonly code?: string;
  /** What belongs to neither field. */
  readonly other?: string;
}

/** What is wrong with a password or a code before either is sent. */
export function emptyProof(proof: { readonly password: string; readonly code?: string }): ProofProblems {
  return {
    ...(proof.password === '' ? { password: 'The password is empty. Type it.' } : {}),
    ...(proof.code !== undefined && proof.code.replace(/[\s-]/g, '').length < 6
      ? {
          code: `The code ${proof.code.trim() === '' ? 'is empty' : `${proof.code.trim()} is too short`}. Type the six digits that your authenticator app shows.`,
        }
      : {}),
  };
}

/** Why a request that carried a password and a code was refused, each reason at its field. */
export function proofProblems(thrown: Error | null): ProofProblems {
  if (thrown === null) return {};
  const { details, message, code } = asApiError(thrown);
  const field = details[0]?.path;
  if (code === 'wrong-credentials' && field === 'password')
    return { password: 'This is not your current password. Type it again.' };
  if (field === 'code') return { code: message };
  return { other: message };
}
