/** Shows results in the cells of a notebook. Everything shown also reads where scripts and styles are taken away. */

import { cautions } from '../assessment/cautions';
import type { Findings } from '../assessment/findings';
import { answerCard } from '../assessment/make-answer-card';
import { refuseUnknownOptions } from '../errors';
import type { Figure } from '../figures/figure';
import type { Forbids } from '../record/fitness';
import { answerHtml, stepHtml } from '../report/answer-html';
import { figureHtml } from '../report/figure-html';
import { figureLibraryHtml } from '../report/figure-library';
import { escapeHtml, listHtml } from '../report/html-text';
import { componentStyle } from '../report/look';
import { staticPictures } from '../report/static-picture';
import { type Table, type TableLook, tableHtml } from '../report/table';
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

/**
 * Shows one figure, or several side by side where there is room. null, which says that a figure has nothing to
 * draw, is left out.
 */
export async function showFigure(...figures: (Figure | null)[]): Promise<void> {
  const drawn = figures.filter((figure) => figure !== null);
  if (drawn.length === 0) return showHtml('<p>No figure: the record gave nothing to draw here.</p>');
  const pictures = await staticPictures(drawn);
  const shown = drawn.map((figure, place) => figureHtml(figure, pictures[place]!)).join('\n');
  await showHtml(drawn.length > 1 ? `<div class="sb-row">${shown}</div>` : shown);
}

export interface ShowTableOptions extends TableLook {
  /** Title above the table. Default: the table's own, or `Data frame`. */
  readonly title?: string;
}

/** Shows a table or a danfo data frame. Throws WrongUse for an unknown option. */
export async function showTable(table: Table | FrameLike, options: ShowTableOptions = {}): Promise<void> {
  refuseUnknownOptions('showTable', options, ['rows', 'folded', 'title']);
  const { title, ...look } = options;
  const shown =
    'title' in table ? { ...table, title: title ?? table.title } : tableOf(table, title ?? 'Data frame');
  await showHtml(tableHtml(shown, look));
}

/** Shows how many fitness checks the record passes, and of each other one what it found and what it takes away. */
export async function showFitness({ fitness }: Findings): Promise<void> {
  const failed = fitness.checks.filter((check) => !check.passed);
  const count = `${fitness.checks.length - failed.length} of ${fitness.checks.length} checks of the record are passed.`;
  const sentences = failed.map(({ text, limit, forbids }) => {
    const taken = forbids.map((thing) => takenAway[thing]).join(', ');
    return `${text} Limit: ${limit}. ${taken ? `This takes away: ${taken}.` : 'This is a warning only.'}`;
  });
  const advice = failed.length > 0 ? `<p>${escapeHtml(fitness.recordToAskFor)}</p>` : '';
  await showHtml(`<p><strong>${count}</strong></p>${listHtml(sentences)}${advice}`);
}

const takenAway: Readonly<Record<Forbids, string>> = {
  cycle: 'any word on a cycle',
  cause: 'the cause',
  numbers: 'the numbers S and J',
};

/** Shows why the cause was named, what was ruled out, what else may contribute, and why numbers were refused. */
export async function showReasons({ assessment }: Findings): Promise<void> {
  const { cause, stictionRefused } = assessment;
  const parts: [string, readonly string[]][] = [
    [`Why: ${cause.verdict}`, cause.reasons],
    ['Ruled out', cause.ruledOut],
    ['May contribute', cause.also],
    ['Why there are no numbers for S and J', stictionRefused],
  ];
  const shown = parts.filter(([, sentences]) => sentences.length > 0);
  await showHtml(shown.map(([title, sentences]) => `<h3>${title}</h3>${listHtml(sentences)}`).join('\n'));
}

/** Shows the next steps in order, each with its caution. */
export async function showNextSteps({ assessment }: Findings): Promise<void> {
  await showHtml(`<ol class="sb-steps">${assessment.next.map(stepHtml).join('\n')}</ol>`);
}

/** Shows the cautions that go with every answer. */
export async function showCautions(): Promise<void> {
  await showHtml(`<div class="sb-cautions">${listHtml(cautions)}</div>`);
}
