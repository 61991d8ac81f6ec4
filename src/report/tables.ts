import type { LimitName, Limits, Rival } from '../core/advice/advice.ts';
import { corner, decibels, hertz, quantity, seconds, significant } from '../core/figure.ts';
import { FAMILY_NAMES } from '../core/filter/name.ts';
import type { ChannelStudy } from '../core/study-result.ts';
import { html, type Markup } from './markup.ts';

/**
 * All rivals of a channel, sorted so that the winner's reason is visible: those that keep every limit first, the simplest on
 * top; the others by their error, and the chosen one before them where none keeps every limit.
 */
export function rivalsTable({ channel, rivals, advice }: ChannelStudy, limits: Limits): Markup {
  const chosen = (rival: Rival) => rival.family === advice.family && rival.order === advice.order;
  const keeps = (rival: Rival) => rival.fails.length === 0;
  const sorted = [
    ...rivals.filter(keeps).sort((a, b) => a.order - b.order || a.errorPower - b.errorPower),
    ...rivals
      .filter((rival) => !keeps(rival))
      .sort((a, b) => Number(chosen(b)) - Number(chosen(a)) || a.errorPower - b.errorPower),
  ];
  const sorting = rivals.some(keeps)
    ? 'Those that keep every limit come first, the simplest on top.'
    : 'None keeps every limit: the chosen one comes first, the others by their error.';
  return html`<div class="scroll" tabindex="0" role="region" aria-label="Rivals for ${channel.name}">
<table>
<caption><span>Rivals for ${channel.name}. ${sorting}</span></caption>
<thead><tr><th scope="col">filter</th><th scope="col">order</th><th scope="col">corner</th><th scope="col">droop</th><th scope="col">rejection</th><th scope="col">noise in use, after, RMS</th><th scope="col">error, RMS</th><th scope="col">× Wiener bound</th><th scope="col">delay</th><th scope="col">settling to 1 %</th><th scope="col" class="text">limits</th></tr></thead>
<tbody>${sorted.map((rival) => rivalRow(rival, { unit: channel.unit, limits, chosen: chosen(rival) }))}</tbody>
</table>
</div>`;
}

function rivalRow(rival: Rival, row: { unit: string; limits: Limits; chosen: boolean }): Markup {
  const { unit, chosen } = row;
  const missed = rival.fails.map((name) => `${name} by ${significant(shortfallDb(rival, name, row.limits), 2)} dB`);
  const limits = missed.length === 0 ? 'keeps all' : `misses ${missed.join(' and ')}`;
  return html`<tr${chosen ? html` class="chosen"` : ''}><th scope="row">${FAMILY_NAMES[rival.family]}</th><td>${rival.order}</td><td>${corner(rival.cornerHz)}</td><td>${decibels(rival.droopDb)}</td><td>${rival.rejectionDb === null ? 'no line' : decibels(rival.rejectionDb)}</td><td>${quantity(rival.noiseAfterRms, unit)}</td><td>${quantity(Math.sqrt(rival.errorPower), unit)}</td><td>${significant(rival.wienerRatio, 2)}×</td><td>${seconds(rival.delaySeconds)}</td><td>${seconds(rival.settlingSeconds)}</td><td class="text">${chosen ? 'chosen, ' : ''}${limits}</td></tr>
`;
}

/** How far a rival falls short of a limit, dB, positive. */
function shortfallDb(rival: Rival, name: LimitName, limits: Limits): number {
  if (name === 'droop') return rival.droopDb - limits.droopDb;
  return limits.rejectionDb - (rival.rejectionDb ?? 0);
}

/** Noise lines of a channel with what the filter does to each, computed and measured, and what may hide behind them. */
export function linesTable({ channel, lines, lineGains }: ChannelStudy): Markup {
  if (lines.length === 0) return html`<p>No noise line stands above the noise floor of ${channel.name}.</p>`;
  return html`<div class="scroll" tabindex="0" role="region" aria-label="Noise lines of ${channel.name}">
<table>
<caption><span>Noise lines of ${channel.name} in the quiet recording, and the gain of the filter at each: computed, and measured by running the quiet recording through it.</span></caption>
<thead><tr><th scope="col">frequency</th><th scope="col">amplitude</th><th scope="col">above the floor</th><th scope="col">gain computed</th><th scope="col">gain measured</th><th scope="col" class="text">family</th><th scope="col" class="text">could be folded from</th></tr></thead>
<tbody>${lines.map((line, i) => {
    const gain = lineGains[i];
    const folded = line.foldedFrom
      .slice(0, 3)
      .map(({ frequencyHz, mains }) => `${hertz(frequencyHz, 4)}${mains ? ` (${mains})` : ''}`);
    return html`<tr><th scope="row">${hertz(line.frequencyHz, 4)}</th><td>${quantity(line.amplitude, channel.unit)}</td><td>${decibels(line.aboveFloorDb)}</td><td>${decibels(gain.computedDb)}</td><td>${gain.measuredDb === null ? 'not measurable' : decibels(gain.measuredDb)}</td><td class="text">${line.family ?? 'alone'}</td><td class="text">${folded.join(', ')}${line.foldedFrom.length > 3 ? ', …' : ''}</td></tr>
`;
  })}</tbody>
</table>
</div>`;
}
