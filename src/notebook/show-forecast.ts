/** Shows forecasts and comparisons before and after a repair in the cells of a notebook. */
import type { RepairComparison } from '../forecast/compare-assessments';
import { comparisonCard } from '../forecast/comparison-card';
import type { ForecastResult } from '../forecast/forecast';
import { forecastCard } from '../forecast/forecast-card';
import { testCardHtml } from '../report/test-card';
import { showHtml } from './kernel-display';

/** Shows the card of a forecast, or why there is none, with its cautions. */
export async function showForecast(result: ForecastResult): Promise<void> {
  await showHtml(testCardHtml(forecastCard(result)));
}

/** Shows the card of a comparison before and after work on the valve, with its cautions. */
export async function showComparison(comparison: RepairComparison): Promise<void> {
  await showHtml(testCardHtml(comparisonCard(comparison)));
}
