import { describe, expect, it } from 'vitest';
import type { Finding, Severity } from '../../src/core/health/finding.ts';
import { findingsTable } from '../../src/report/findings.ts';

const finding = (severity: Severity, channel: string | null): Finding => ({
  severity,
  channel,
  kind: 'spikes',
  what: 'One spike of <b>9</b> g.',
  effect: 'It raises & spreads.',
  advice: 'Look for it.',
});

describe('the table of findings', () => {
  it('gives severity in words, the finding with its channel, its effect and what to do; all of it escaped', () => {
    const { text } = findingsTable(
      [finding('refusal', 'a<i>'), finding('warning', null), finding('note', 'b')],
      'the "pair"',
    );
    const rows = [...text.matchAll(/<tr><th scope="row">(.*?)<\/th>(.*?)<\/tr>/g)].map(([, severity, cells]) => ({
      severity: severity.replace(/<[^>]*>/g, ''),
      cells: [...cells.matchAll(/<td class="text">(.*?)<\/td>/g)].map((match) => match[1]),
    }));
    expect(rows.map(({ severity }) => severity)).toEqual(['Refusal', 'Warning', 'note']);
    expect(rows[0].cells).toEqual([
      '<strong>a&lt;i&gt;: spikes.</strong> One spike of &lt;b&gt;9&lt;/b&gt; g.',
      'It raises &amp; spreads.',
      'Look for it.',
    ]);
    expect(rows[1].cells[0]).toMatch(/^<strong>spikes\.<\/strong>/);
    expect(text).toContain('aria-label="Findings about the &quot;pair&quot;"');
  });

  it('says so where there are none', () => {
    expect(findingsTable([], 'the pair').text).toBe('<p>Nothing was found wrong with the pair.</p>');
  });
});
