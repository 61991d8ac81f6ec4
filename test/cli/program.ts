import { execFile } from 'node:child_process';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';

const run = promisify(execFile);

/** The top folder of the project. */
export const root = fileURLToPath(new URL('../..', import.meta.url));

/** What a call of the program came to. */
export interface Outcome {
  readonly code: number;
  readonly stdout: string;
  readonly stderr: string;
}

/** Bundles the program as it is now; to be called once before `quietcorner`. */
export async function buildProgram(): Promise<void> {
  await run('node', ['src/build/bundle.mjs'], { cwd: root });
}

/** Runs the bundled program in a folder. */
export async function quietcorner(folder: string, ...words: string[]): Promise<Outcome> {
  try {
    const { stdout, stderr } = await run('node', [join(root, 'dist', 'quietcorner.js'), ...words], { cwd: folder });
    return { code: 0, stdout, stderr };
  } catch (error) {
    return error as Outcome;
  }
}
