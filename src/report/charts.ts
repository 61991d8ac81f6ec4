import type { ChannelStudy, Study } from '../core/study-result.ts';
import type { ChartSpec } from './chart-spec.ts';
import { spectrumChart } from './spectrum-chart.ts';
import { insetChart, overviewChart } from './trace-charts.ts';

/** Names of the pictures of one channel, by its place in the study. */
export function pictureIds(study: ChannelStudy, place: number) {
  return {
    overview: `channel-${place + 1}-overview`,
    insets: study.simulation.insets.map((_, i) => `channel-${place + 1}-inset-${i + 1}`),
    spectrum: `channel-${place + 1}-spectrum`,
  };
}

/** Every picture of the report in one theme: per channel the overview, the insets and the spectra. */
export function reportCharts(study: Study): readonly ChartSpec[] {
  return study.channels.flatMap((channel, place) => {
    const ids = pictureIds(channel, place);
    return [
      overviewChart(channel, ids.overview),
      ...channel.simulation.insets.map((inset, i) => insetChart(channel, inset, ids.insets[i])),
      spectrumChart(channel, ids.spectrum),
    ];
  });
}
