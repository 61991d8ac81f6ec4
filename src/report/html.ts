import { decibels, hertz } from '../core/figure.ts';
import type { ChannelStudy, Study } from '../core/study-result.ts';
import type { ChartSpec } from './chart-spec.ts';
import { pictureIds, reportCharts } from './charts.ts';
import { cautionsSection, healthSection } from './health.ts';
import { html, Markup } from './markup.ts';
import { STYLE } from './style.ts';
import { linesTable, rivalsTable } from './tables.ts';
import { verdictSection } from './verdicts.ts';

/** One drawn picture as a data URI. */
export interface Picture {
  readonly id: string;
  readonly png: string;
}

/** What the study itself does not know. */
export interface ReportContext {
  /** The call that makes this report again. */
  readonly commandLine: string;
  /** When it was made, ISO 8601. */
  readonly madeAt: string;
}

const POLICY = "default-src 'none'; img-src data:; style-src 'unsafe-inline'";

/**
 * The report of a study as one HTML file: no script, no request, everything inside; all text from files is escaped.
 * `pictures` hold one entry for each of `reportCharts`. Throws RangeError where one is missing.
 */
export function renderReport(study: Study, pictures: readonly Picture[], context: ReportContext): string {
  const specs = new Map(reportCharts(study).map((spec) => [spec.id, spec]));
  const drawn = new Map(pictures.map((picture) => [picture.id, picture]));
  const figure = (id: string, caption: string) => figureOf(specs.get(id), drawn.get(id), caption);
  const page = html`<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${POLICY}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="generator" content="Quietcorner ${study.version}">
<title>Noise filter for ${study.active.file}</title>
<style>${new Markup(STYLE)}</style>
</head>
<body>
<main>
<header>
<h1>Noise filter for ${study.active.file}</h1>
<p>Chosen from a quiet recording, ${study.quiet.file}, and an active one, ${study.active.file}. Limits: droop at most ${decibels(study.settings.droopDb)} at the keep-band edge, rejection at least ${decibels(study.settings.rejectionDb)} at the first noise line.</p>
</header>
${verdictSection(study)}
<section aria-labelledby="traces">
<h2 id="traces">Before and after</h2>
${study.channels.map((channel, place) => traces(channel, place, figure))}
</section>
<section aria-labelledby="spectra">
<h2 id="spectra">Spectra, keep band and noise lines</h2>
${study.channels.map(
  (channel, place) => html`<h3>${channel.channel.name}</h3>
${figure(pictureIds(channel, place).spectrum, 'Triangles mark the noise lines found in the quiet recording; the shaded stretch is the keep band. The dashed curve is the gain of the filter, on the right-hand scale. Amplitude density is the square root of the power spectral density.')}
${linesTable(channel)}
${inUse(channel)}
`,
)}
</section>
<section aria-labelledby="rivals">
<h2 id="rivals">Rivals</h2>
<p>Each stands at its own best corner within the limits: droop at most ${decibels(study.settings.droopDb)}, rejection at least ${decibels(study.settings.rejectionDb)}. The error is what is expected against the delayed signal, distortion and noise together; its power is also given as a multiple of the Wiener bound, which no linear filter can beat.</p>
${study.channels.map((channel) => rivalsTable(channel, study.settings))}
</section>
${healthSection(study)}
${cautionsSection(study)}
${reproduction(study, context)}
<section aria-labelledby="sign">
<h2 id="sign">Signed</h2>
<div class="sign"><div>Name and function</div><div>Date and signature</div><div>Reviewed by, name and function</div><div>Date and signature</div></div>
</section>
</main>
</body>
</html>
`;
  return page.text;
}

function traces(study: ChannelStudy, place: number, figure: (id: string, caption: string) => Markup): Markup {
  const ids = pictureIds(study, place);
  return html`<h3>${study.channel.name}</h3>
${figure(ids.overview, 'The whole active recording; every column of pixels spans its smallest and largest sample, so no peak is lost.')}
<div class="pair">${study.simulation.insets.map((inset, i) => figure(ids.insets[i], `${inset.title}, every sample.`))}</div>
`;
}

function inUse({ inUse: bands }: ChannelStudy): Markup | '' {
  if (bands.length === 0) return '';
  const named = bands.map((band) => `${hertz(band.lowHz, 3)} to ${hertz(band.highHz, 3)}`).join(', ');
  return html`<p>Present only in use, and treated as noise: ${named}. If it is signal, widen the keep band with <code>--keep</code>.</p>`;
}

function figureOf(spec: ChartSpec | undefined, picture: Picture | undefined, caption: string): Markup {
  if (spec === undefined || picture === undefined) throw new RangeError('A picture of the report is missing');
  const img = html`<img src="${picture.png}" width="${spec.widthPx}" height="${spec.heightPx}" alt="${spec.description}">`;
  const wide = spec.widthPx > 600;
  // Wide pictures scroll on narrow screens, since their text could not be read if they were shrunk.
  const shown = wide
    ? html`<div class="scroll wide" tabindex="0" role="region" aria-label="${spec.title}">${img}</div>`
    : img;
  return html`<figure>${shown}<figcaption>${caption}</figcaption></figure>
`;
}

function reproduction(study: Study, context: ReportContext): Markup {
  const { settings } = study;
  const rows: [string, string][] = [
    ['Command', context.commandLine],
    ['Version', `Quietcorner ${study.version}`],
    ['Made', context.madeAt],
    ['Quiet recording', study.quiet.file],
    ['its SHA-256', study.quiet.sha256],
    ['Active recording', study.active.file],
    ['its SHA-256', study.active.sha256],
    ['Limits', `droop ${decibels(settings.droopDb)}, rejection ${decibels(settings.rejectionDb)}`],
    [
      'Keep band',
      settings.keepHz === null
        ? 'measured'
        : `given: ${hertz(settings.keepHz.lowHz, 4)} to ${hertz(settings.keepHz.highHz, 4)}`,
    ],
    ['First frequency to reject', settings.rejectHz === null ? 'measured' : `given: ${hertz(settings.rejectHz, 4)}`],
    ['Channels', settings.channels === null ? 'all that both recordings hold' : settings.channels.join(', ')],
    ['Sampling rate', settings.rateHz === null ? 'from the time columns' : `given: ${hertz(settings.rateHz, 6)}`],
  ];
  return html`<section aria-labelledby="again">
<h2 id="again">How to reproduce it</h2>
<div class="scroll" tabindex="0" role="region" aria-label="How to reproduce this report">
<table><caption><span>The same files, version and settings give the same figures.</span></caption>
<tbody>${rows.map(([name, value]) => html`<tr><th scope="row">${name}</th><td class="text"><code>${value}</code></td></tr>\n`)}</tbody></table>
</div>
</section>`;
}
