/** Text that is known to be HTML. */
export class Markup {
  readonly text: string;

  constructor(text: string) {
    this.text = text;
  }

  toString(): string {
    return this.text;
  }
}

type Value = string | number | Markup | null | undefined | false | readonly Value[];

/**
 * Makes HTML from a template; every value is escaped unless it is Markup itself, lists are joined, and null, undefined and
 * false leave nothing. The one way by which text reaches the report.
 */
export function html(parts: TemplateStringsArray, ...values: readonly Value[]): Markup {
  return new Markup(parts.reduce((all, part, i) => `${all}${printed(values[i - 1])}${part}`));
}

function printed(value: Value): string {
  if (value === null || value === undefined || value === false) return '';
  if (value instanceof Markup) return value.text;
  if (Array.isArray(value)) return value.map(printed).join('');
  return escapeText(unbroken(String(value)));
}

/** A number keeps to its unit where a line ends. */
function unbroken(text: string): string {
  return text.replace(/(?<=[\d×∞]) (?=(?:k?Hz|dB|[mµn]?s|min|h|%)(?![\w/]))/g, '\u00a0');
}

const ESCAPES: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

function escapeText(text: string): string {
  return text.replace(/[&<>"']/g, (character) => ESCAPES[character] as string);
}
