/**
 * The ranked loops of an audit as one table: a row of figures and a small picture a loop, and under it, one click away,
 * its whole answer with the reasons. It needs no script; where scripts run, it can be sorted.
 */
import type { Assessment, Evidence } from '../assessment/assessment';
import { decisionLine, duration, withInterval, workRequest } from '../assessment/make-answer-card';
import { inOneLine } from '../audit/audit-card';
import { type RankedFindings, roleOf, swingOfRange } from '../audit/audit-findings';
import { short } from '../figures/plain-numbers';
import { verdictMarks } from '../figures/verdict-marks';
import { stepHtml } from './answer-html';
import { loopAnchor } from './audit-html';
import { escapeHtml, listHtml } from './html-text';
import { loopPictureSvg } from './loop-picture';
import { sortTablesHtml } from './sort-tables';

export interface RankedTableLook {
  /** Link to the page of a loop, by loop, relative to where the table stands. Default: none. */
  readonly pages?: Readonly<Record<string, string>>;
}

interface Column {
  readonly head: string;
  /** `more`: the largest first when sorted by it. */
  readonly sort: 'less' | 'more' | 'text' | null;
  readonly cell: (loop: RankedFindings) => { readonly html: string; readonly key: string | number | null };
}

const columns: readonly Column[] = [
  { head: 'place', sort: 'less', cell: ({ place }) => ({ html: String(place), key: place }) },
  {
    head: 'loop',
    sort: 'text',
    cell: ({ assessment: { loop, service } }) => ({
      html: `<strong>${escapeHtml(loop)}</strong><br><span class="sb-note">${service}</span>`,
      key: loop,
    }),
  },
  { head: 'some cycles: PV, OP', sort: null, cell: (loop) => ({ html: pictureHtml(loop), key: null }) },
  {
    head: 'cause',
    sort: 'text',
    cell: ({ assessment: { cause } }) => ({
      html: `${verdictHtml(cause.verdict)}<br><span class="sb-note">${cause.confidence === null ? '' : `confidence ${percent(cause.confidence)}`}</span>`,
      key: cause.verdict,
    }),
  },
  {
    head: 'dead band S, %',
    sort: 'more',
    cell: ({ assessment: { stiction } }) => ({
      html: stiction === null ? '–' : inTwoLines(withInterval({ ...stiction.S, unit: '' })),
      key: stiction?.S.value ?? null,
    }),
  },
  {
    head: 'PV swing',
    sort: 'more',
    cell: (loop) => {
      const share = swingOfRange(loop);
      const swing = `${short(loop.assessment.severity.pvSwing, 2)} ${loop.signature.pvUnit}`.trim();
      const note = share === null ? 'range not stated' : `${short(share, 2)} % of range`;
      return { html: `${escapeHtml(swing)}<br><span class="sb-note">${note}</span>`, key: share };
    },
  },
  {
    head: 'period',
    sort: 'more',
    cell: ({ assessment: { oscillation } }) => ({
      html: oscillation.period === null ? '–' : duration(oscillation.period),
      key: oscillation.period,
    }),
  },
  {
    head: 'turns a day',
    sort: 'more',
    cell: ({ assessment: { severity } }) => ({
      html: String(Math.round(severity.reversalsPerDay)),
      key: severity.reversalsPerDay,
    }),
  },
  {
    head: 'shared cycle',
    sort: 'text',
    cell: (loop) => {
      const { group } = loop;
      if (group === null) return { html: '', key: null };
      const role = roleOf(loop)!;
      const note = role === 'likely shaken' ? `by ${group.likelySource}` : `${group.loops.length} loops`;
      return {
        html: `${role}<br><span class="sb-note">${escapeHtml(note)}</span>`,
        key: `${group.period.toFixed(1)} ${role}`,
      };
    },
  },
  { head: 'score', sort: 'more', cell: ({ score }) => ({ html: score.toFixed(1), key: score }) },
];

/** All ranked loops. '' for none. */
export function rankedTableHtml(
  ranked: readonly RankedFindings[],
  { pages = {} }: RankedTableLook = {},
): string {
  if (ranked.length === 0) return '';
  const head = columns.map(
    ({ head, sort }) => `<th scope="col"${sort === null ? '' : ` data-sort-by="${sort}"`}>${head}</th>`,
  );
  return [
    '<div class="sb-table sb-ranked"><table class="sb-sortable">',
    `<thead><tr>${head.join('')}</tr></thead>`,
    ...ranked.map((loop) => loopBody(loop, pages[loop.assessment.loop] ?? null)),
    '</table></div>',
    sortTablesHtml,
  ].join('\n');
}

/** One loop: its row of figures, and the row that unfolds. */
function loopBody(loop: RankedFindings, page: string | null): string {
  const cells = columns.map(({ sort, cell }) => {
    const { html, key } = cell(loop);
    const look = sort === 'more' || sort === 'less' ? ' class="sb-number"' : '';
    return `<td${look}${key === null ? '' : ` data-key="${escapeHtml(String(key))}"`}>${html}</td>`;
  });
  const line = inOneLine(loop.assessment, loop.reasons, loop.group);
  return (
    `<tbody><tr>${cells.join('')}</tr>` +
    `<tr class="sb-more"><td colspan="${columns.length}"><details><summary>${escapeHtml(line)}</summary>` +
    `<div class="sb-whole" id="${loopAnchor(loop.place)}">${wholeAnswer(loop, page)}</div></details></td></tr></tbody>`
  );
}

/** Everything that the audit keeps of a loop, in the order of the answer card. */
function wholeAnswer(loop: RankedFindings, page: string | null): string {
  const { assessment, reasons } = loop;
  const { cause, next, stictionRefused, record, provenance } = assessment;
  const request = workRequest(assessment);
  return [
    `<h3>${escapeHtml(decisionLine(assessment))}</h3>`,
    page === null
      ? ''
      : `<p><a href="${escapeHtml(encodeURI(page))}">The page of ${escapeHtml(assessment.loop)}, with all its figures</a></p>`,
    `<p>${pictureHtml(loop)}<span class="sb-note">${escapeHtml(pictureWords(loop))}</span></p>`,
    figuresHtml(loop),
    '<div class="sb-columns">',
    part('Why this cause', cause.reasons),
    part('Ruled out', cause.ruledOut),
    part('Why this place of the ranking', reasons),
    part('Why there are no numbers for S and J', stictionRefused),
    part('What each indicator says', indicatorSentences(assessment.evidence)),
    part(
      'Notes on the record',
      record.notes.map(({ text }) => text),
    ),
    '</div>',
    next.length > 0
      ? `<div class="sb-part"><h4>What to do next</h4><ol class="sb-steps">${next.map(stepHtml).join('')}</ol></div>`
      : '',
    request === ''
      ? ''
      : `<div class="sb-part"><h4>Work request, to copy</h4><blockquote>${escapeHtml(request)}</blockquote></div>`,
    `<p class="sb-note">File ${escapeHtml(loop.file)}, SHA-256 ${record.sha256}; seed ${provenance.seed}.</p>`,
  ].join('');
}

function part(title: string, sentences: readonly string[]): string {
  return sentences.length === 0 ? '' : `<div class="sb-part"><h4>${title}</h4>${listHtml(sentences)}</div>`;
}

function figuresHtml({ assessment, signature }: RankedFindings): string {
  const { stiction, oscillation, severity, record, controller, service, response } = assessment;
  const J = stiction === null ? null : stiction.J === null ? 'not resolved' : withInterval(stiction.J);
  const { regularity: r } = oscillation;
  const regularity = r === null ? '' : `, regularity ${r > 100 ? 'above 100' : short(r)}`;
  const rows: [string, string | null][] = [
    ['Dead band S', stiction === null ? null : `${withInterval(stiction.S)}, travel ${stiction.travel}`],
    ['Slip jump J', J],
    ['Size', severity.size],
    [
      'Period',
      oscillation.period === null
        ? null
        : `${duration(oscillation.period)}, ${oscillation.cycles} cycles${regularity}`,
    ],
    ['Other periods', oscillation.others.map(duration).join(', ') || null],
    ['PV swing', `${short(severity.pvSwing)} ${signature.pvUnit}`.trim()],
    ['OP swing', `${short(severity.opSwing)} %`],
    ['Controller', controller === null ? null : controllerWords(controller)],
    ['Service', `${service}, ${response === 'unknown' ? 'response not known' : response}`],
    [
      'Record',
      `${duration((record.samples - 1) * record.samplePeriod)} from ${record.start}, ${record.samples} samples`,
    ],
  ];
  const shown = rows.filter(([, value]) => value !== null);
  return `<table class="sb-figures"><tbody>${shown.map(([what, value]) => `<tr><th scope="row">${what}</th><td>${escapeHtml(value!)}</td></tr>`).join('')}</tbody></table>`;
}

function controllerWords({ form, gain, integralTime }: NonNullable<Assessment['controller']>): string {
  const integral = integralTime === null ? '' : `, integral time ${duration(integralTime)}`;
  return `${form}, gain ${short(gain)}${integral} (read from the record)`;
}

const sides: readonly [Evidence['says'], string][] = [
  ['stiction', 'For stiction'],
  ['not', 'Against'],
  ['undecided', 'Undecided'],
  ['skipped', 'Skipped'],
];

function indicatorSentences(evidence: readonly Evidence[]): string[] {
  return sides.flatMap(([says, words]) => {
    const names = evidence.filter((one) => one.says === says).map(({ indicator }) => indicator);
    return names.length === 0 ? [] : [`${words}: ${names.join(', ')}.`];
  });
}

function verdictHtml(verdict: Assessment['cause']['verdict']): string {
  const { sign, color } = verdictMarks[verdict];
  return `<span style="color: ${color}" aria-hidden="true">${sign}</span> ${verdict}`;
}

function pictureHtml(loop: RankedFindings): string {
  const svg = Buffer.from(loopPictureSvg(loop.signature.picture), 'utf8').toString('base64');
  const alt = `${loop.assessment.loop}: ${pictureWords(loop)}`;
  return `<img class="sb-cycles" src="data:image/svg+xml;base64,${svg}" alt="${escapeHtml(alt)}" width="200" height="60" loading="lazy">`;
}

function pictureWords({ signature: { picture, pvUnit } }: RankedFindings): string {
  const { pv, op, step } = picture;
  const span = (values: readonly number[]): string =>
    `${short(Math.min(...values))} to ${short(Math.max(...values))}`;
  return `${duration((pv.length - 1) * step)} of the record: PV above, ${`${span(pv)} ${pvUnit}`.trim()}; OP below, ${span(op)} %`;
}

function inTwoLines(text: string): string {
  return escapeHtml(text).replace(/\s+(\(.*)$/, '<br><span class="sb-note">$1</span>');
}

function percent(share: number): string {
  return `${Math.round(100 * share)} %`;
}
