/** The audit of a unit as plain text for a terminal: counts, where to look first, what cycles together. */
import type { Audit } from '../audit/audit';
import { countsInWords } from '../audit/audit-card';
import { bullets, wrapped } from './answer-text';

/** Loops shown of the ranking; the JSON has all. */
const shownLoops = 8;
const width = 92;

export function auditText(audit: Audit): string {
  const first = audit.ranking.filter(({ score }) => score > 0).slice(0, shownLoops);
  const sections: string[][] = [
    wrapped(countsInWords(audit.loops), width),
    first.length === 0
      ? []
      : ['Look first at', ...first.flatMap(({ loop, reasons }, i) => ranked(i + 1, loop, reasons))],
    bullets(
      'Cycling together',
      audit.groups.map(({ period, loops, likelySource }) => {
        const source = likelySource === null ? 'the source cannot be told' : `likely source ${likelySource}`;
        return `${Number(period.toPrecision(3))} s: ${loops.join(', ')}; ${source}`;
      }),
      width,
    ),
    bullets('Cautions', audit.cautions, width),
  ];
  return sections
    .filter((lines) => lines.length > 0)
    .map((lines) => lines.join('\n'))
    .join('\n\n');
}

function ranked(place: number, loop: string, reasons: readonly string[]): string[] {
  const start = `  ${place}. `;
  return wrapped(`${loop}: ${reasons.join(' ')}`, width, start, ' '.repeat(start.length));
}
