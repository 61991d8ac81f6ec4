import { once } from 'node:events';
import { createWriteStream, type WriteStream } from 'node:fs';
import { access, constants, mkdir, rename, rm } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { UserError } from '../core/user-error.ts';

/** Makes sure that a folder is there and can be written to, before any work is done; throws UserError('output'). */
export async function prepareFolder(folder: string): Promise<void> {
  try {
    await mkdir(folder, { recursive: true });
    await access(folder, constants.W_OK);
  } catch (error) {
    throw cannotWrite(folder, error);
  }
}

/** Writes a whole file beside its target and renames it into place; throws UserError('output'). */
export async function writeWhole(path: string, content: string): Promise<void> {
  const file = new GrowingFile(path);
  try {
    await file.write(content);
    await file.keep();
  } catch (error) {
    await file.drop();
    throw error;
  }
}

/** A file written piece by piece beside its target; `keep` renames it into place, `drop` leaves nothing behind. */
export class GrowingFile {
  private readonly path: string;
  private readonly partPath: string;
  private readonly stream: WriteStream;
  private failure: unknown = null;

  constructor(path: string) {
    this.path = path;
    this.partPath = join(dirname(path), `.${basename(path)}.${process.pid}.part`);
    this.stream = createWriteStream(this.partPath);
    this.stream.on('error', (error) => {
      this.failure = error;
    });
  }

  /** Waits while the disk is behind, so that memory stays flat. */
  async write(text: string): Promise<void> {
    if (this.failure) throw cannotWrite(this.path, this.failure);
    if (!this.stream.write(text)) await Promise.race([once(this.stream, 'drain'), once(this.stream, 'close')]);
  }

  async keep(): Promise<void> {
    await this.close();
    if (this.failure) {
      await this.drop();
      throw cannotWrite(this.path, this.failure);
    }
    try {
      await rename(this.partPath, this.path);
    } catch (error) {
      throw cannotWrite(this.path, error);
    }
  }

  async drop(): Promise<void> {
    await this.close();
    await rm(this.partPath, { force: true });
  }

  private async close(): Promise<void> {
    if (this.stream.closed) return;
    this.stream.end();
    await once(this.stream, 'close');
  }
}

function cannotWrite(path: string, error: unknown): UserError {
  const code = (error as NodeJS.ErrnoException).code ?? String(error);
  const why: Record<string, string> = {
    EACCES: 'permission is refused',
    EROFS: 'the file system is read-only',
    ENOSPC: 'the disk is full',
    ENOTDIR: 'part of the path is a file, not a folder',
    EEXIST: 'a file of that name stands in the way',
    EISDIR: 'a folder of that name stands in the way',
  };
  return new UserError('output', `Cannot write ${path}: ${why[code] ?? code}; choose another place with --out.`);
}
