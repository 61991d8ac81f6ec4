import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { html, Markup } from '../../src/report/markup.ts';

describe('html', () => {
  it('lets no text open a tag, an entity or an attribute', () => {
    fc.assert(
      fc.property(fc.string(), (text) => {
        const { text: made } = html`<p title="${text}">${text}</p>`;
        expect(made.match(/[<>]/g)).toHaveLength(4);
        expect(made.match(/"/g)).toHaveLength(2);
        expect(made.replace(/&(amp|lt|gt|quot|#39);/g, '')).not.toMatch(/&/);
      }),
    );
  });

  it('prints back what was put in', () => {
    fc.assert(
      fc.property(fc.string(), (text) => {
        const back = html`${text}`.text
          .replaceAll('&lt;', '<')
          .replaceAll('&gt;', '>')
          .replaceAll('&quot;', '"')
          .replaceAll('&#39;', "'")
          .replaceAll('&amp;', '&');
        expect(back.replaceAll('\u00a0', ' ')).toBe(text.replaceAll('\u00a0', ' '));
      }),
    );
  });

  it('joins lists, leaves nothing of null, and takes markup as it is', () => {
    expect(html`${['a', html`<b>${'<'}</b>`]}${null}${undefined}${false}${0}`.text).toBe('a<b>&lt;</b>0');
    expect(new Markup('<i>').toString()).toBe('<i>');
  });

  it('keeps a number and its unit on one line', () => {
    expect(html`${'24.3 Hz and 12 % in 3 steps'}`.text).toBe('24.3\u00a0Hz and 12\u00a0% in 3 steps');
  });
});
