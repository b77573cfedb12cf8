/** Shows results in the cells of a notebook. Everything shown also reads where scripts and styles are taken away. */

import { cautions } from '../assessment/cautions';
import type { Findings } from '../assessment/findings';
import { answerCard } from '../assessment/make-answer-card';
import type { Figure } from '../figures/figure';
import { answerHtml } from '../report/answer-html';
import { figureHtml } from '../report/figure-html';
import { figureLibraryHtml } from '../report/figure-library';
import { listHtml } from '../report/html-text';
import { componentStyle } from '../report/look';
import { staticPictures } from '../report/static-picture';
import { type Table, tableHtml } from '../report/table';
import { type FrameLike, tableOf } from './data-frame';
import { showHtml } from './kernel-display';

/**
 * Prepares the notebook: the look and the figure library. Once in a notebook is enough; figures shown before or
 * without it stay static pictures.
 */
export async function showSetUp(): Promise<void> {
  await showHtml(`<style>${componentStyle}</style>\n${figureLibraryHtml()}`);
}

/** Shows the answer card of a loop, with its cautions. */
export async function showAnswer(findings: Findings): Promise<void> {
  await showHtml(answerHtml(answerCard(findings)));
}

/** Shows one figure, or several side by side where there is room. */
export async function showFigure(...figures: Figure[]): Promise<void> {
  const pictures = await staticPictures(figures);
  const shown = figures.map((figure, place) => figureHtml(figure, pictures[place]!)).join('\n');
  await showHtml(figures.length > 1 ? `<div class="sb-row">${shown}</div>` : shown);
}

/** Shows at most `rows` rows (default 40) of a table or a danfo data frame. */
export async function showTable(table: Table | FrameLike, rows: number = 40): Promise<void> {
  await showHtml(tableHtml('title' in table ? table : tableOf(table), rows));
}

/** Shows the cautions that go with every answer. */
export async function showCautions(): Promise<void> {
  await showHtml(`<div class="sb-cautions">${listHtml(cautions)}</div>`);
}
