import { createHash } from 'node:crypto';
import { chmod, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { fileSource } from '../../src/cli/file-source.ts';
import { openRecording } from '../../src/core/recording/open.ts';
import type { ByteSource } from '../../src/core/recording/recording.ts';
import { UserError } from '../../src/core/user-error.ts';

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'quietcorner-source-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function all(source: ByteSource): Promise<Buffer> {
  const chunks: Buffer[] = [];
  for await (const chunk of source.chunks()) chunks.push(Buffer.from(chunk));
  return Buffer.concat(chunks);
}

async function failure(path: string): Promise<UserError> {
  const error: unknown = await openRecording(fileSource(path)).then(
    () => null,
    (thrown: unknown) => thrown,
  );
  expect(error).toBeInstanceOf(UserError);
  return error as UserError;
}

describe('fileSource', () => {
  const content = Buffer.from(Array.from({ length: 700_001 }, (_, i) => (i * 7919) % 251));
  const digest = createHash('sha256').update(content).digest('hex');
  const file = async () => {
    const path = join(folder, 'bytes.bin');
    await writeFile(path, content);
    return path;
  };

  it('gives all bytes, as often as asked, and their SHA-256', async () => {
    const source = fileSource(await file());
    expect((await all(source)).equals(content)).toBe(true);
    expect(await source.sha256()).toBe(digest);
    expect((await all(source)).equals(content)).toBe(true);
    expect(await source.sha256()).toBe(digest);
  });

  it('gives the SHA-256 of the whole file after a pass that was broken off, or none', async () => {
    const source = fileSource(await file());
    for await (const chunk of source.chunks()) if (chunk.length > 0) break;
    expect(await source.sha256()).toBe(digest);
    expect(await fileSource(await file()).sha256()).toBe(digest);
  });

  it('says that there is no such file', async () => {
    const path = join(folder, 'missing.csv');
    expect(await failure(path)).toMatchObject({
      kind: 'input',
      message: `${path}: there is no such file; check the name and the folder.`,
    });
    expect((await failure(join(await file(), 'below.csv'))).message).toContain('there is no such file');
  });

  it('says that a folder is no file', async () => {
    expect(await failure(folder)).toMatchObject({ kind: 'input', message: `${folder} is a folder; give a file.` });
  });

  it('says that a device is no file', async () => {
    expect((await failure('/dev/null')).message).toBe(
      '/dev/null is a pipe or a device; write the recording to a file first.',
    );
  });

  it('says that there is no permission', async () => {
    const path = join(folder, 'locked.csv');
    await writeFile(path, 'time,a\n');
    await chmod(path, 0);
    const root = process.getuid?.() === 0;
    if (root) process.seteuid?.('nobody');
    try {
      expect((await failure(path)).message).toBe(
        `${path} cannot be read: no permission; change its rights or copy it.`,
      );
    } finally {
      if (root) process.seteuid?.(0);
    }
  });
});
