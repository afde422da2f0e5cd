import { createHash } from 'node:crypto';
import { mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';

/** Keeps bytes by their SHA-256: the same bytes are one file, and a kept file never changes. */
export interface FileStore {
  put(bytes: Buffer): Promise<string>;
  get(sha256: string): Promise<Buffer>;
}

export const sha256Of = (bytes: Buffer | string): string => createHash('sha256').update(bytes).digest('hex');

/** File store in a local folder. */
export function createLocalFileStore(folder: string): FileStore {
  const pathOf = (sha256: string) => {
    if (!/^[0-9a-f]{64}$/.test(sha256)) throw new Error('A kept file is named by 64 hexadecimal digits.');
    return join(folder, sha256.slice(0, 2), sha256);
  };
  return {
    async put(bytes) {
      const sha256 = sha256Of(bytes);
      const path = pathOf(sha256);
      await mkdir(join(folder, sha256.slice(0, 2)), { recursive: true });
      const partial = `${path}.${process.pid}.part`;
      await writeFile(partial, bytes);
      await rename(partial, path);
      return sha256;
    },
    get: (sha256) => readFile(pathOf(sha256)),
  };
}
