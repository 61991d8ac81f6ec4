import { count, hertz, percent, quantity, seconds, significant } from '../core/figure.ts';
import { bySeverity } from '../core/health/finding.ts';
import type { RecordingFacts } from '../core/recording/recording.ts';
import { understood } from '../core/recording/understood.ts';
import type { ChannelStudy, Study } from '../core/study-result.ts';
import { findingsTable } from './findings.ts';
import { html, type Markup } from './markup.ts';

/** Jitter below this share of a period is rounding in the last digits. */
const NO_JITTER = 1e-5;

/** What was understood of both files, what is odd about them, and which part of the quiet one was used. */
export function healthSection(study: Study): Markup {
  const findings = bySeverity([...study.findings, ...study.channels.flatMap((channel) => channel.findings)]);
  return html`<section aria-labelledby="health">
<h2 id="health">Health of the recordings</h2>
${recording('Quiet', study.quiet)}
${recording('Active', study.active)}
<h3>Findings</h3>
${findingsTable(findings, 'the pair and its channels')}
<h3>The pair</h3>
<ul>
${study.channels.map(quietPart)}
</ul>
</section>`;
}

function recording(role: string, facts: RecordingFacts): Markup {
  const { jitterSeconds, rateHz, gaps } = facts;
  const jitter =
    jitterSeconds * rateHz > NO_JITTER
      ? `Jitter of the stamps ${seconds(jitterSeconds)} (${percent(jitterSeconds * rateHz)} of a period)${facts.resampled ? '; samples were interpolated onto an even grid' : ''}.`
      : `The stamps show no jitter (under ${percent(NO_JITTER, 1)} of a period).`;
  return html`<h3>${role}: ${facts.file}</h3>
<ul>
<li>${understood(facts)}.</li>
<li>${jitter}</li>
${gaps.slice(0, 10).map((gap) => html`<li>Gap of ${seconds(gap.lengthSeconds)} at ${seconds(gap.atSeconds)}, before line ${count(gap.row)} of the file.</li>\n`)}
${gaps.length > 10 && html`<li>${count(gaps.length - 10)} more gaps.</li>`}
${facts.leftOut.map((column) => html`<li>Column ${column.column}, “${column.name}”, left out: ${column.why}.</li>\n`)}
${facts.notes.map((note) => html`<li>${note.severity === 'warning' ? html`<strong>Warning:</strong> ` : ''}${note.text}</li>\n`)}
</ul>
`;
}

function quietPart({ channel, quietPart: part, noiseGain, resolution }: ChannelStudy): Markup {
  const { usedSeconds, totalSeconds, stretches } = part;
  const shown = stretches.slice(0, 5).map((at) => `${seconds(at.fromSeconds)} to ${seconds(at.toSeconds)}`);
  const more = stretches.length > shown.length ? ` and ${count(stretches.length - shown.length)} more stretches` : '';
  const where = usedSeconds < totalSeconds && shown.length > 0 ? ` (${shown.join(', ')}${more})` : '';
  return html`<li>${channel.name}: ${seconds(usedSeconds)} of ${seconds(totalSeconds)} of the quiet recording carry the noise figures${where}; noise in use is ${percent(noiseGain, 3)} of the quiet one.${resolved(channel.unit, resolution)}</li>
`;
}

/** Step and effective bits in one sentence with its own blank. */
function resolved(unit: string, { step, effectiveBits }: ChannelStudy['resolution']): string {
  const steps = step === null ? '' : ` Values come in steps of ${quantity(step, unit)}.`;
  return Number.isFinite(effectiveBits)
    ? `${steps} The range in use over the quiet noise makes ${significant(effectiveBits, 2)} effective bits.`
    : steps;
}

/** Lines that a mains harmonic above half the rate could have folded into, in one sentence with its own blank. */
function folded(study: Study): string {
  const suspects = study.channels.flatMap(({ channel, lines }) =>
    lines.flatMap(({ frequencyHz, foldedFrom }) => {
      const from = foldedFrom.find(({ mains }) => mains !== null);
      if (from === undefined) return [];
      return [`${hertz(frequencyHz, 4)} of ${channel.name} (${from.mains} at ${hertz(from.frequencyHz, 4)})`];
    }),
  );
  return suspects.length === 0 ? '' : ` Lines that mains could have folded into: ${suspects.slice(0, 6).join('; ')}.`;
}

/** What must be said with every filter, whatever the figures. */
export function cautionsSection(study: Study): Markup {
  const rateHz = Math.min(study.quiet.rateHz, study.active.rateHz);
  const slowest = study.channels.reduce((a, b) => (b.advice.delaySeconds > a.advice.delaySeconds ? b : a));
  return html`<section aria-labelledby="cautions">
<h2 id="cautions">Cautions</h2>
<ul>
<li><strong>Delay.</strong> Every filter here is late: up to ${seconds(slowest.advice.delaySeconds)} (${slowest.channel.name}). In a control or protection loop that delay costs stability and reaction time; have it checked by whoever answers for the loop.</li>
<li><strong>Alarms.</strong> A filter can hide what an alarm is meant to see: short shocks, the start of a fault, a failing sensor. Take alarms from the unfiltered signal unless the filter has been approved for them.</li>
<li><strong>Folding.</strong> A digital filter cannot undo what the converter has folded down. Anything above ${hertz(rateHz / 2, 3)} at the sensor appears below it in these recordings; where that cannot be ruled out, an analog filter must stand before the converter.${folded(study)}</li>
<li><strong>Other conditions.</strong> The advice holds for the machine, mounting and speed that were recorded. Record again after a change of any of them.</li>
<li><strong>Mains-connected and medical equipment.</strong> Follow the local codes and the equipment's standards; isolation and leakage limits come before noise.</li>
<li><strong>Safety functions.</strong> Where a wrong reading can hurt someone, have a licensed or otherwise qualified person review and sign this before it is built.</li>
</ul>
</section>`;
}
