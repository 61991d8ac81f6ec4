import type { Finding, Severity } from '../core/health/finding.ts';
import { html, type Markup } from './markup.ts';

/** How a severity is said to people; never by colour alone. */
const WORDS: Record<Severity, string> = { note: 'note', warning: 'Warning', refusal: 'Refusal' };

/** Findings as a table: how bad, what, what it does, what to do. One sentence where there are none. */
export function findingsTable(findings: readonly Finding[], about: string): Markup {
  if (findings.length === 0) return html`<p>Nothing was found wrong with ${about}.</p>`;
  return html`<div class="scroll" tabindex="0" role="region" aria-label="Findings about ${about}">
<table>
<caption>Findings about ${about}, the worst first.</caption>
<thead><tr><th scope="col">severity</th><th scope="col" class="text">finding</th><th scope="col" class="text">what it does to the advice</th><th scope="col" class="text">what to do</th></tr></thead>
<tbody>${findings.map(row)}</tbody>
</table>
</div>`;
}

function row({ severity, channel, kind, what, effect, advice }: Finding): Markup {
  const word = severity === 'note' ? WORDS.note : html`<strong>${WORDS[severity]}</strong>`;
  return html`<tr><th scope="row">${word}</th><td class="text"><strong>${channel === null ? '' : `${channel}: `}${kind}.</strong> ${what}</td><td class="text">${effect}</td><td class="text">${advice}</td></tr>
`;
}
