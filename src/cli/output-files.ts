import { rmSync } from 'node:fs';
import { access, constants, type FileHandle, mkdir, open, rename, rm } from 'node:fs/promises';
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

/** Files begun and not yet kept or dropped. */
const begun = new Set<string>();
const INTERRUPTIONS = { SIGINT: 2, SIGTERM: 15 };

/** Leaves no partial file behind and ends as shells expect: 128 and the signal's number. */
function interrupted(signal: keyof typeof INTERRUPTIONS): never {
  for (const path of begun) rmSync(path, { force: true });
  process.exit(128 + INTERRUPTIONS[signal]);
}

/** A file written piece by piece beside its target; `keep` renames it into place, `drop` and an interruption leave nothing behind. */
export class GrowingFile {
  private readonly path: string;
  private readonly partPath: string;
  private handle: FileHandle | null = null;

  constructor(path: string) {
    this.path = path;
    this.partPath = join(dirname(path), `.${basename(path)}.${process.pid}.part`);
  }

  /** Writes all of it before it returns, so that memory stays flat and bytes may be used again. */
  async write(content: string | Uint8Array): Promise<void> {
    try {
      this.handle ??= await this.begin();
      await this.handle.writeFile(content);
    } catch (error) {
      throw cannotWrite(this.path, error);
    }
  }

  async keep(): Promise<void> {
    try {
      await this.close();
      await rename(this.partPath, this.path);
      begun.delete(this.partPath);
    } catch (error) {
      await this.drop();
      throw cannotWrite(this.path, error);
    }
  }

  async drop(): Promise<void> {
    await this.close();
    await rm(this.partPath, { force: true });
    begun.delete(this.partPath);
  }

  private begin(): Promise<FileHandle> {
    if (process.listenerCount('SIGINT', interrupted) === 0) {
      process.on('SIGINT', interrupted);
      process.on('SIGTERM', interrupted);
    }
    begun.add(this.partPath);
    return open(this.partPath, 'w');
  }

  private async close(): Promise<void> {
    const { handle } = this;
    this.handle = null;
    await handle?.close();
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
