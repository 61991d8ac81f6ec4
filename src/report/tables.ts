import type { Rival } from '../core/advice/advice.ts';
import { decibels, hertz, quantity, seconds, significant } from '../core/figure.ts';
import type { ChannelStudy } from '../core/study-result.ts';
import { html, type Markup } from './markup.ts';

const FAMILY_NAMES: Record<Rival['family'], string> = {
  rc: 'RC, one pole',
  butterworth: 'Butterworth',
  bessel: 'Bessel',
};

/** All rivals of a channel: those that keep the limits first, the simplest on top, so that the winner's reason is visible. */
export function rivalsTable({ channel, rivals, advice }: ChannelStudy): Markup {
  const sorted = [...rivals].sort(
    (a, b) => a.fails.length - b.fails.length || a.order - b.order || a.errorPower - b.errorPower,
  );
  const chosen = (rival: Rival) => rival.family === advice.family && rival.order === advice.order;
  return html`<div class="scroll" tabindex="0" role="region" aria-label="Rivals for ${channel.name}">
<table>
<caption>Rivals for ${channel.name}, each at its own best corner. Those that keep every limit come first, the simplest on top.</caption>
<thead><tr><th scope="col">filter</th><th scope="col">order</th><th scope="col">corner</th><th scope="col">droop</th><th scope="col">rejection</th><th scope="col">noise in use after, RMS</th><th scope="col">error RMS</th><th scope="col">over Wiener bound</th><th scope="col">delay</th><th scope="col">settling 1 %</th><th scope="col" class="text">limits</th></tr></thead>
<tbody>${sorted.map((rival) => rivalRow(rival, channel.unit, chosen(rival)))}</tbody>
</table>
</div>`;
}

function rivalRow(rival: Rival, unit: string, chosen: boolean): Markup {
  const limits = rival.fails.length === 0 ? 'keeps all' : `fails ${rival.fails.join(' and ')}`;
  return html`<tr${chosen ? html` class="chosen"` : ''}><th scope="row">${FAMILY_NAMES[rival.family]}</th><td>${rival.order}</td><td>${hertz(rival.cornerHz, 3)}</td><td>${decibels(rival.droopDb)}</td><td>${rival.rejectionDb === null ? 'no line' : decibels(rival.rejectionDb)}</td><td>${quantity(rival.noiseAfterRms, unit)}</td><td>${quantity(Math.sqrt(rival.errorPower), unit)}</td><td>${significant(rival.wienerRatio, 2)}×</td><td>${seconds(rival.delaySeconds)}</td><td>${seconds(rival.settlingSeconds)}</td><td class="text">${limits}${chosen ? ' · chosen' : ''}</td></tr>
`;
}

/** Noise lines of a channel with what the filter does to each, computed and measured, and what may hide behind them. */
export function linesTable({ channel, lines, lineGains }: ChannelStudy): Markup {
  if (lines.length === 0) return html`<p>No noise line stands above the noise floor of ${channel.name}.</p>`;
  return html`<div class="scroll" tabindex="0" role="region" aria-label="Noise lines of ${channel.name}">
<table>
<caption>Noise lines of ${channel.name} in the quiet recording, and the gain of the filter at each: computed, and measured by running the quiet recording through it.</caption>
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
