/** Shows plans and readings of valve tests in the cells of a notebook. */

import { valveTestCautions } from '../assessment/cautions';
import { planCard } from '../field-test/plan-card';
import type { ValveTestFindings } from '../field-test/read-valve-test';
import { readingCard } from '../field-test/reading-card';
import type { ValveTestPlan } from '../field-test/valve-test-plan';
import { listHtml } from '../report/html-text';
import { testCardHtml } from '../report/test-card';
import { showHtml } from './kernel-display';

/** Shows the card of a valve test that was read, with its cautions. */
export async function showValveTest(findings: ValveTestFindings): Promise<void> {
  await showHtml(testCardHtml(readingCard(findings)));
}

/** Shows the card of a plan: a proposal, not released, with its check list and cautions. */
export async function showValveTestPlan(plan: ValveTestPlan): Promise<void> {
  await showHtml(testCardHtml(planCard(plan)));
}

/** Shows the cautions that go with every plan and every reading of a valve test. */
export async function showValveTestCautions(): Promise<void> {
  await showHtml(`<div class="sb-cautions">${listHtml(valveTestCautions)}</div>`);
}
