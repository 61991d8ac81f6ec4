export type Theme = 'light' | 'dark';

/** Colours of one theme. Curves are Okabe & Ito 2008 ("Color Universal Design"), told apart by dash and width as well. */
export interface Colours {
  readonly paper: string;
  readonly ink: string;
  readonly faint: string;
  readonly grid: string;
  /** Before the filter, and the active recording. */
  readonly before: string;
  /** Behind the filter. */
  readonly after: string;
  readonly quiet: string;
  readonly floor: string;
  readonly gain: string;
  readonly keep: string;
  readonly mark: string;
}

export const COLOURS: Readonly<Record<Theme, Colours>> = {
  light: {
    paper: '#ffffff',
    ink: '#1d2427',
    faint: '#566166',
    grid: '#dfe3e2',
    before: '#9aa5a9',
    after: '#0072b2',
    quiet: '#d55e00',
    floor: '#a8552a',
    gain: '#1d2427',
    keep: 'rgba(0, 158, 115, 0.14)',
    mark: '#cc79a7',
  },
  dark: {
    paper: '#171c1e',
    ink: '#e6eaea',
    faint: '#a5b0b3',
    grid: '#343c3f',
    before: '#77848a',
    after: '#56b4e9',
    quiet: '#e69f00',
    floor: '#c9923a',
    gain: '#e6eaea',
    keep: 'rgba(0, 158, 115, 0.28)',
    mark: '#e39cc4',
  },
};
