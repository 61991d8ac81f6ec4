import { Command, CommanderError } from 'commander';
import type { AdviseOptions } from './advise.ts';
import { EXIT, report } from './exit.ts';
import { band, collect, positive } from './options.ts';
import { VERSION } from './version.ts';
import type { VetOptions } from './vet.ts';

const program = new Command('quietcorner')
  .description(
    'From two sensor recordings - quiet (mounted, idle) and active (in use) - to a noise filter that is chosen with evidence.',
  )
  .version(VERSION)
  .exitOverride()
  .showHelpAfterError('(--help lists what there is)')
  .configureOutput({ outputError: (text, write) => write(text.replace(/^error: /, 'quietcorner: ')) });

// A reader that has seen enough, such as `head`, is no fault.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(EXIT.done);
  throw error;
});

let exitCode: number = EXIT.done;

program
  .command('advise')
  .summary('suggest a filter from a quiet and an active recording; writes report and plan')
  .description(
    'Compares a quiet recording (the machine idle) with an active one (in use), suggests corner, order and family of a low-pass filter for every common channel, tries it on both recordings, and writes an HTML report and a plan.',
  )
  .argument('<quiet>', 'CSV recorded with the sensor mounted and powered, what it measures idle')
  .argument('<active>', 'CSV recorded in use')
  .option('--keep <LOW-HIGH>', 'keep band in Hz, such as 0-1.5, instead of the measured one', band('--keep'))
  .option('--reject <HZ>', 'first frequency to reject in Hz, instead of the first noise line', positive('--reject'))
  .option('--droop <DB>', 'most loss at the keep-band edge, dB', positive('--droop'), 0.5)
  .option('--rejection <DB>', 'least attenuation at the first noise line, dB', positive('--rejection'), 20)
  .option('--channel <NAME>', 'study this channel only; may be given several times', collect)
  .option('--rate <HZ>', 'sampling rate in Hz for recordings without a time column', positive('--rate'))
  .option('--out <FOLDER>', 'where report and plan go', 'reports')
  .option('--filtered', 'also write time, raw and filtered values of the active recording as CSV')
  .option('--json', 'print the result as one JSON document instead of the summary')
  .option('--strict', 'exit with 1 where signal and noise are inseparable')
  .action(async (quiet: string, active: string, options: AdviseOptions) => {
    const { advise } = await import('./advise.ts');
    exitCode = await advise(quiet, active, options);
  });

program
  .command('vet')
  .summary('say what is wrong with recordings: clipping, stuck values, spikes, drift, jitter, mains ...')
  .description(
    'Reads each recording, says what was understood of it, and lists what is wrong with it: the measured figure, where, what it does to the advice, and what can be done. Severities are note, warning and refusal.',
  )
  .argument('<file...>', 'CSV recordings')
  .option('--channel <NAME>', 'examine this channel only; may be given several times', collect)
  .option('--rate <HZ>', 'sampling rate in Hz for recordings without a time column', positive('--rate'))
  .option('--json', 'print the result as one JSON document instead')
  .action(async (files: string[], options: VetOptions) => {
    const { vet } = await import('./vet.ts');
    exitCode = await vet(files, options);
  });

try {
  await program.parseAsync();
} catch (error) {
  // Commander has already printed help, version or what was wrong with the call.
  if (error instanceof CommanderError) exitCode = error.exitCode === 0 ? EXIT.done : EXIT.usage;
  else exitCode = report(error);
}
process.exitCode = exitCode;
