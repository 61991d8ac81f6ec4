import { execFile } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdir, mkdtemp, rename, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { promisify } from 'node:util';
import { type Browser, chromium } from 'playwright-core';

const run = promisify(execFile);

/** A browser that has been seen to start: plain data, handed from the global set-up to the tests. */
export interface FoundBrowser {
  readonly executablePath: string;
  /** Variables that it needs on top of ours: where its libraries and fonts are. */
  readonly env: Readonly<Record<string, string>>;
}

const SYSTEM_PATHS = ['/usr/bin/chromium', '/usr/bin/chromium-browser'];

/** First the browser that came with `npm ci`, then one of the system; null where neither starts. */
export async function findBrowser(): Promise<FoundBrowser | null> {
  const carried = await unpackCarried().catch(() => null);
  const candidates = carried
    ? [
        carried,
        { ...carried, env: { ...carried.env, LD_LIBRARY_PATH: join(dirname(carried.executablePath), 'al2023/lib') } },
      ]
    : [];
  for (const candidate of [...candidates, ...SYSTEM_PATHS.map((executablePath) => ({ executablePath, env: {} }))]) {
    if (await starts(candidate)) return candidate;
  }
  return null;
}

/** Starts a found browser for playwright. */
export function launch({ executablePath, env }: FoundBrowser): Promise<Browser> {
  return chromium.launch({
    executablePath,
    env: { ...process.env, ...env },
    args: [
      '--headless',
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

async function starts({ executablePath, env }: FoundBrowser): Promise<boolean> {
  if (!existsSync(executablePath)) return false;
  return run(executablePath, ['--version', '--headless', '--no-sandbox'], { env: { ...process.env, ...env } }).then(
    () => true,
    () => false,
  );
}

/** Unpacks @sparticuz/chromium, once for all runs on this machine; renamed into place, so that nobody meets half of it. */
async function unpackCarried(): Promise<FoundBrowser | null> {
  if (process.platform !== 'linux' || process.arch !== 'x64') return null;
  const folder = join(tmpdir(), 'quietcorner-browser-143.0.4');
  if (!existsSync(folder)) {
    const part = await mkdtemp(`${folder}.`);
    await unpackInto(part);
    // Another run may have been first: its folder is as good as ours.
    await rename(part, folder).catch(() => rm(part, { recursive: true }));
  }
  return { executablePath: join(folder, 'chromium'), env: { FONTCONFIG_FILE: await fontList(folder) } };
}

async function unpackInto(folder: string): Promise<void> {
  const before = { TMPDIR: process.env['TMPDIR'], AWS_EXECUTION_ENV: process.env['AWS_EXECUTION_ENV'] };
  // The package unpacks below TMPDIR, and the libraries that a bare machine lacks only where it believes to be on such a one.
  Object.assign(process.env, { TMPDIR: folder, AWS_EXECUTION_ENV: 'AWS_Lambda_nodejs20.x' });
  try {
    const { default: carried } = await import('@sparticuz/chromium');
    await carried.executablePath();
  } finally {
    for (const [name, value] of Object.entries(before)) {
      if (value === undefined) delete process.env[name];
      else process.env[name] = value;
    }
  }
}

/** The system's fonts and the one that came with the browser, which alone is there on a bare machine. */
async function fontList(folder: string): Promise<string> {
  const folders = ['/usr/share/fonts', join(folder, 'fonts')];
  const path = join(folder, 'fonts.conf');
  await mkdir(join(folder, 'font-cache'), { recursive: true });
  await writeFile(
    path,
    `<?xml version="1.0"?><!DOCTYPE fontconfig SYSTEM "fonts.dtd"><fontconfig>${folders.map((dir) => `<dir>${dir}</dir>`).join('')}<cachedir>${join(folder, 'font-cache')}</cachedir></fontconfig>\n`,
  );
  return path;
}
