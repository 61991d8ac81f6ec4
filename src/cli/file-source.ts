import { createHash } from 'node:crypto';
import { open, stat } from 'node:fs/promises';
import type { ByteSource } from '../core/recording/recording.ts';
import { UserError } from '../core/user-error.ts';

/** Bytes of a read. */
const READ_BYTES = 1 << 18;

/**
 * A file as a source of bytes, read again from the start as often as asked. A chunk is valid only until the next is taken: one
 * buffer serves all reads. The SHA-256 is computed along the first pass that reaches the end. Reading throws UserError('input')
 * where there is no such file, where it is no file, or where it must not be read.
 */
export function fileSource(path: string): ByteSource {
  let digest: string | null = null;
  async function* chunks(): AsyncGenerator<Uint8Array> {
    const file = await openFile(path);
    try {
      const hash = digest === null ? createHash('sha256') : null;
      const buffer = new Uint8Array(READ_BYTES);
      for (;;) {
        const { bytesRead } = await file.read(buffer, 0, READ_BYTES);
        if (bytesRead === 0) break;
        const chunk = buffer.subarray(0, bytesRead);
        hash?.update(chunk);
        yield chunk;
      }
      if (hash) digest ??= hash.digest('hex');
    } catch (error) {
      throw told(path, error);
    } finally {
      await file.close();
    }
  }
  return {
    name: path,
    chunks,
    async sha256() {
      if (digest === null) for await (const _chunk of chunks());
      return digest as unknown as string;
    },
  };
}

async function openFile(path: string) {
  try {
    const facts = await stat(path);
    if (facts.isDirectory()) throw new UserError('input', `${path} is a folder; give a file.`);
    if (!facts.isFile())
      throw new UserError('input', `${path} is a pipe or a device; write the recording to a file first.`);
    return await open(path);
  } catch (error) {
    throw told(path, error);
  }
}

/** The error in words a user can act on; what is no file system error stays as it is. */
function told(path: string, error: unknown): unknown {
  const code = (error as NodeJS.ErrnoException).code;
  if (code === undefined) return error;
  if (code === 'ENOENT' || code === 'ENOTDIR')
    return new UserError('input', `${path}: there is no such file; check the name and the folder.`);
  if (code === 'EACCES' || code === 'EPERM')
    return new UserError('input', `${path} cannot be read: no permission; change its rights or copy it.`);
  return new UserError('input', `${path} cannot be read (${code}); check the disk or copy the file.`);
}
