import { verdictSentence } from '../core/advice/sentence.ts';
import { corner, decibels, hertz, percent, quantity, seconds, significant } from '../core/figure.ts';
import type { ChannelStudy, Study } from '../core/study-result.ts';
import { studyWarnings } from '../core/study-warnings.ts';
import { html, type Markup } from './markup.ts';

/** What comes first: for each channel the corner, the verdict in one sentence and its figures; then the warnings, then the reasons. */
export function verdictSection(study: Study): Markup {
  return html`<section aria-labelledby="verdict">
<h2 id="verdict">Which filter</h2>
${study.channels.map(channelVerdict)}
${studyWarnings(study).map(({ severity, text }) => html`<p class="warning"><strong>${severity === 'refusal' ? 'Do not use this:' : 'Mind this:'}</strong> ${text}</p>\n`)}
</section>
<section aria-labelledby="why">
<h2 id="why">Why, and what it costs</h2>
<div class="reasons">${study.channels.map(({ channel, advice }) => html`<div><h3>${channel.name}</h3><ul>${advice.reasons.map((reason) => html`<li>${reason}</li>`)}</ul></div>\n`)}</div>
</section>`;
}

function channelVerdict({ channel, keep, advice }: ChannelStudy): Markup {
  const [low, high] = advice.cornerRangeHz;
  return html`<div class="verdict">
<h3>${channel.name}<span class="badge ${advice.verdict}">${advice.verdict}</span></h3>
<div class="corner ${advice.verdict}">${corner(advice.cornerHz)}<small>${advice.verdict === 'inseparable' ? 'corner of least harm' : 'corner (−3 dB cutoff)'}</small><small>90 % interval ${hertz(low, 3)} to ${hertz(high, 3)}</small></div>
<div>
<p>${verdictSentence(channel.unit, keep, advice)}</p>
<dl class="figures">${figures(channel.unit, advice).map(([name, value]) => html`<div><dt>${name}</dt><dd>${value}</dd></div>`)}</dl>
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
