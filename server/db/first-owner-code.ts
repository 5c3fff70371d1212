import { createHash, createHmac, randomBytes } from 'node:crypto';
import { openDatabase } from './open-database.ts';

const nonceBytes = 16;
// 96 bits: nobody finds it by trying.
const codeCharacters = 24;

/**
 * The code that makes the first person of a database, for the starter to print; null where there are people already. Every
 * process with the same secret makes the same code; with another secret a new one takes its place. Only its hash is kept.
 */
export async function prepareFirstOwnerCode(
  databaseUrl: string,
  serverSecret: string,
): Promise<string | null> {
  const { knex, close } = openDatabase(databaseUrl);
  try {
    return await knex.transaction(async (trx) => {
      // Two starters may ask at once: the second waits, and finds the first one's.
      await trx.raw('lock table first_owner_code in exclusive mode');
      if ((await trx('people').whereNull('left_at').first('id')) !== undefined) return null;
      const kept = await trx('first_owner_code').first<{ nonce: Buffer; code_hash: Buffer } | undefined>();
      if (kept !== undefined) {
        const code = codeOf(kept.nonce, serverSecret);
        if (firstOwnerCodeHash(code).equals(kept.code_hash)) return code;
        await trx('first_owner_code').delete();
      }
      const nonce = randomBytes(nonceBytes);
      const code = codeOf(nonce, serverSecret);
      await trx('first_owner_code').insert({ nonce, code_hash: firstOwnerCodeHash(code) });
      return code;
    });
  } finally {
    await close();
  }
}

/** Spaces, hyphens and capitals don't count. */
export function firstOwnerCodeHash(code: string): Buffer {
  return createHash('sha256').update(code.replace(/[\s-]/g, '').toLowerCase()).digest();
}

function codeOf(nonce: Buffer, serverSecret: string): string {
  const digest = createHmac('sha256', serverSecret)
    .update('longpatch first owner')
    .update(nonce)
    .digest('hex');
  return digest.slice(0, codeCharacters).replace(/(.{4})(?=.)/g, '$1-');
}
