/** The file store of the application: bytes in a folder or bucket, and a row for each in `files`. */
import { randomBytes } from 'node:crypto';
import type { Knex } from 'knex';
import type { Config } from '../config.ts';
import { AppError } from '../errors/app-error.ts';
import { createFolderStore } from './folder-store.ts';
import type { FileStore } from './types.ts';

export interface ByteStore {
  write(key: string, bytes: Uint8Array, mediaType: string): Promise<void>;
  /** Null where there is nothing under the key. */
  read(key: string): Promise<Uint8Array | null>;
  erase(key: string): Promise<void>;
}

/** Keys are made here, by `put`; the check keeps any other text from becoming a path. */
const KEY = /^[0-9a-f]{32}$/;
/** A file that nothing points to for so long belongs to something that was rolled back or purged. */
const ORPHAN_HOURS = 24;

export async function createFileStore(config: Config, db: Knex): Promise<FileStore> {
  const store = await createByteStore(config);
  return {
    async put(bytes, mediaType) {
      const key = randomBytes(16).toString('hex');
      // The row comes first: should the process die now, the sweep finds the file by it.
      await db('files').insert({ key, media_type: mediaType, size_bytes: bytes.byteLength });
      await store.write(key, bytes, mediaType);
      return key;
    },
    async get(key) {
      const bytes = KEY.test(key) ? await store.read(key) : null;
      if (!bytes) throw new AppError(404, 'file-missing', 'The file is not here any more.');
      return bytes;
    },
    async remove(key) {
      if (!KEY.test(key)) return;
      await store.erase(key);
      await db('files').where({ key }).delete();
    },
  };
}

async function createByteStore(config: Config): Promise<ByteStore> {
  if (config.storage.kind === 'folder') return createFolderStore(config.storage.folder);
  // The package is large, and most installations never need it.
  const { createS3Store } = await import('./s3-store.ts');
  return createS3Store(config.storage);
}

/** Removes files that no column named `…file_key` points to. Answers how many went. */
export async function sweepOrphans(db: Knex, files: FileStore): Promise<number> {
  const { rows: columns } = await db.raw<{ rows: { table_name: string; column_name: string }[] }>(
    `SELECT table_name, column_name FROM information_schema.columns WHERE table_schema = current_schema() AND column_name LIKE '%file\\_key'`,
  );
  const orphans = db('files as f').where('f.created_at', '<', db.raw(`now() - make_interval(hours => ?)`, [ORPHAN_HOURS])).limit(500).select('f.key');
  for (const { table_name: table, column_name: column } of columns) {
    orphans.whereNotExists(db(table).whereRaw('?? = f.key', [`${table}.${column}`]).select(db.raw('1')));
  }
  const found: { key: string }[] = await orphans;
  for (const { key } of found) await files.remove(key);
  return found.length;
}
