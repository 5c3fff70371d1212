import type { SecretBox } from '../auth/secret-box.ts';
import type { Database } from '../db/open-database.ts';
import type { NumberingCache } from './numbering.ts';
import type { DocumentCache } from './stored-documents.ts';
import type { ThumbnailCache } from './thumbnails.ts';

/** What services work with: one per process. */
export interface Context {
  readonly database: Database;
  readonly clock: () => Date;
  /** Origin that people type, without a slash at the end; links in mails start with it. */
  readonly publicUrl: string;
  /** For secrets that have to be read again. */
  readonly secretBox: SecretBox;
  readonly documents: DocumentCache;
  readonly thumbnails: ThumbnailCache;
  readonly numbering: NumberingCache;
}
