/** What a reader must know before believing a figure; stamped on it, worded from the findings. */
import type { Findings } from '../assessment/findings';

/** At most this many are stamped; the rest stands in the text beside the figure. */
const most = 3;
/** Notes on reading that change what a figure shows, not only what it is called. */
const drawnOtherwise = ['op-small', 'valve-range', 'gaps'];

/**
 * Caveats of anything drawn from the record: a cause that cannot be told, checks of the record that failed and
 * take something away, assumptions made on reading that change the picture.
 */
export function recordCaveats(findings: Findings): string[] {
  const { assessment, fitness, record } = findings;
  const found: string[] = [];
  if (assessment.cause.verdict === 'cannot-tell') {
    found.push(`cannot-tell: ${assessment.cause.reasons[0] ?? 'the record does not decide.'}`);
  }
  for (const check of fitness.checks) {
    if (!check.passed && check.forbids.length > 0) found.push(check.text);
  }
  for (const note of record.notes) {
    if (drawnOtherwise.includes(note.code)) found.push(note.text);
  }
  return shortened(found);
}

/** Caveats of anything drawn from the fit: numbers that must not be quoted, a response of the process not known. */
export function fitCaveats({ record, stiction }: Findings): string[] {
  const found: string[] = [];
  if (stiction.fit === null) {
    const [first = 'the fit does not hold.', ...others] = stiction.refused;
    found.push(`No numbers to quote from this fit: ${first}`, ...others);
  }
  if (record.response === 'unknown') {
    found.push(
      'Whether the process is self-regulating or integrating was not stated; the better fit is shown.',
    );
  }
  return shortened(found);
}

function shortened(sentences: readonly string[]): string[] {
  const distinct = [...new Set(sentences)];
  if (distinct.length <= most) return distinct;
  const left = distinct.length - (most - 1);
  return [...distinct.slice(0, most - 1), `${left} more caveats stand in the text.`];
}
