import { decibels, hertz, quantity } from '../figure.ts';
import { filterName } from '../filter/name.ts';
import type { Advice, KeepBand } from './advice.ts';

/** The advice for one channel in one sentence with its figures, as the report opens and the terminal prints. */
export function verdictSentence(unit: string, keep: KeepBand, advice: Advice): string {
  const noise = `noise falls from ${quantity(advice.noiseBeforeRms, unit)} to ${quantity(advice.noiseAfterRms, unit)} RMS`;
  const kept = `droop ${decibels(advice.droopDb)} at the keep-band edge of ${hertz(keep.highHz, 3)}`;
  const rejected =
    advice.rejectionDb === null || advice.firstLineHz === null
      ? 'no noise line stands above it'
      : `rejection ${decibels(advice.rejectionDb)} at the first noise line, ${hertz(advice.firstLineHz, 3)}`;
  const name = filterName(advice);
  switch (advice.verdict) {
    case 'clear':
      return `Use a ${name}: ${kept}, ${rejected}; ${noise}.`;
    case 'compromise':
      return `No filter keeps every limit; the least loss is a ${name}: ${kept}, ${rejected}; ${noise}.`;
    case 'inseparable':
      return keep.highHz > 0
        ? `No low-pass parts signal and noise here; the least harm is a ${name}: ${kept}, ${rejected}; ${noise}.`
        : `The active recording shows no signal above the quiet one, so no corner can be defended; a ${name} would take noise from ${quantity(advice.noiseBeforeRms, unit)} to ${quantity(advice.noiseAfterRms, unit)} RMS.`;
  }
}
