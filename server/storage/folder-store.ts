/** Files in a folder. A file is whole or not there: it is written beside, flushed, then renamed. */
import { mkdir, open, readFile, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import type { ByteStore } from './file-store.ts';

export function createFolderStore(folder: string): ByteStore {
  const pathOf = (key: string) => join(folder, key.slice(0, 2), key);
  return {
    async write(key, bytes) {
      const path = pathOf(key);
      await mkdir(dirname(path), { recursive: true });
      const beside = `${path}.part`;
      try {
        const file = await open(beside, 'w', 0o600);
        try {
          await file.writeFile(bytes);
          await file.sync();
        } finally {
          await file.close();
        }
        await rename(beside, path);
      } catch (error) {
        await rm(beside, { force: true });
        throw error;
      }
    },
    async read(key) {
      try {
        return await readFile(pathOf(key));
      } catch (error) {
        if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
        throw error;
      }
    },
    async erase(key) {
      await rm(pathOf(key), { force: true });
    },
  };
}
