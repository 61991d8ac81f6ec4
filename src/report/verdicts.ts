import { verdictSentence } from '../core/advice/sentence.ts';
import { decibels, hertz, percent, quantity, seconds, significant } from '../core/figure.ts';
import type { ChannelStudy, Study } from '../core/study-result.ts';
import { html, type Markup } from './markup.ts';

/** What comes first: for each channel the corner, the verdict in one sentence, its figures and its reasons. */
export function verdictSection(study: Study): Markup {
  const warned = study.channels.flatMap((channel) => channel.notes).concat(study.notes);
  const warnings = warned.filter((note) => note.severity === 'warning');
  return html`<section aria-labelledby="verdict">
<h2 id="verdict">Which filter</h2>
${study.channels.map(channelVerdict)}
${warnings.map((note) => html`<p class="warning"><strong>Mind this:</strong> ${note.text}</p>\n`)}
</section>`;
}

function channelVerdict({ channel, keep, advice }: ChannelStudy): Markup {
  const [low, high] = advice.cornerRangeHz;
  return html`<div class="verdict">
<h3>${channel.name}<span class="badge ${advice.verdict}">${advice.verdict}</span></h3>
<div class="corner">${hertz(advice.cornerHz)}<small>corner (−3 dB cutoff)</small><small>90 % interval ${hertz(low, 3)} to ${hertz(high, 3)}</small></div>
<div>
<p>${verdictSentence(channel.unit, keep, advice)}</p>
<dl class="figures">${figures(channel.unit, advice).map(([name, value]) => html`<div><dt>${name}</dt><dd>${value}</dd></div>`)}</dl>
<details open><summary>Why, and what it costs</summary><ul>${advice.reasons.map((reason) => html`<li>${reason}</li>`)}</ul></details>
</div>
</div>
`;
}

function figures(unit: string, advice: ChannelStudy['advice']): [string, string][] {
  return [
    ['noise before, measured', `${quantity(advice.noiseBeforeRms, unit)} RMS`],
    ['noise after, measured', `${quantity(advice.noiseAfterRms, unit)} RMS`],
    ['droop at the edge', decibels(advice.droopDb)],
    ['rejection at the line', advice.rejectionDb === null ? 'no line' : decibels(advice.rejectionDb)],
    ['room', advice.room === null ? 'no line' : `${significant(advice.room, 2)} to 1`],
    ['signal power kept', percent(advice.signalKept, 3)],
    ['delay', seconds(advice.delaySeconds)],
    ['rise, 10 to 90 %', seconds(advice.riseSeconds)],
    ['settling to 1 %', seconds(advice.settlingSeconds)],
    ['overshoot', percent(advice.overshoot)],
  ];
}
