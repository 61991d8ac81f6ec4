import { type Examined, healthDocument } from '../core/health/health-document.ts';
import { examine } from '../core/health/recording-health.ts';
import { openRecording } from '../core/recording/open.ts';
import { UserError } from '../core/user-error.ts';
import { EXIT } from './exit.ts';
import { fileSource } from './file-source.ts';
import { inkFor } from './ink.ts';
import { VERSION } from './version.ts';
import { vetSummary } from './vet-summary.ts';

/** Options of `vet` as commander hands them over. */
export interface VetOptions {
  readonly rate?: number;
  readonly channel?: readonly string[];
  readonly json?: boolean;
}

/** Examines recordings one by one and prints what is wrong with them; gives the exit code: 3 where a file cannot be used. */
export async function vet(paths: readonly string[], options: VetOptions): Promise<number> {
  const ink = inkFor(process.stdout, process.env);
  const examined: Examined[] = [];
  for (const path of paths) {
    const each = await vetFile(path, options);
    examined.push(each);
    if ('unusable' in each) process.stderr.write(`quietcorner: ${each.unusable.message}\n`);
    else if (!options.json) process.stdout.write(vetSummary(each.health, ink));
  }
  if (options.json) process.stdout.write(`${JSON.stringify(healthDocument(examined, VERSION), null, 2)}\n`);
  return examined.some((each) => 'unusable' in each) ? EXIT.input : EXIT.done;
}

async function vetFile(path: string, { rate, channel }: VetOptions): Promise<Examined> {
  try {
    const recording = await openRecording(fileSource(path), rate === undefined ? {} : { rateHz: rate });
    return { file: path, health: await examine(recording, channel ?? null) };
  } catch (error) {
    if (error instanceof UserError && error.kind === 'input') return { file: path, unusable: error };
    throw error;
  }
}
