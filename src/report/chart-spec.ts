import type { ChartConfiguration } from 'chart.js';

/** A picture of the report: what is drawn, how large, and what it says in words. */
export interface ChartSpec {
  /** Unique within a report; letters, digits and hyphens. */
  readonly id: string;
  readonly title: string;
  /** Text for those who do not see the picture, with its figures. */
  readonly description: string;
  readonly widthPx: number;
  readonly heightPx: number;
  readonly config: ChartConfiguration<'line'>;
}

/** A point of a curve; y is NaN where the curve is broken. */
export interface Point {
  readonly x: number;
  readonly y: number;
}
