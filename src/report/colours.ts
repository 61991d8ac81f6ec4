/**
 * Colours of the pictures. Curves are Okabe & Ito 2008 ("Color Universal Design"), told apart by dash and width as well.
 * On a dark page the pictures are inverted and their hues turned back, so that one set serves both.
 */
export const COLOURS = {
  paper: '#ffffff',
  ink: '#1d2427',
  faint: '#566166',
  grid: '#dfe3e2',
  /** Before the filter, and the active recording. */
  before: '#8a969a',
  /** Behind the filter. */
  after: '#0072b2',
  quiet: '#d55e00',
  floor: '#a8552a',
  gain: '#1d2427',
  keep: 'rgba(0, 158, 115, 0.14)',
} as const;
