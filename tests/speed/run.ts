/**
 * Measures how fast the program is: `npm run speed -- [--records N] [--repeats N] [--lengths N,N,...] [--json FILE]`,
 * or `npm run speed -- --audit [--audit-loops N] [--audit-samples N]` for the audit of a unit alone (20 minutes or so),
 * or `npm run speed -- --export [--megabytes 2000]` for a large wide export alone; it takes its size of disk and half as much again.
 *
 * Stage 1 against a search over the same candidates in plain C and NumPy, and the whole assessment of loops of growing
 * length, each in a fresh process. Prints tables and writes JSON. Times mean something only on a quiet machine.
 */
import { fork } from 'node:child_process';
import { mkdirSync, writeFileSync } from 'node:fs';
import { cpus } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { parseArgs } from 'node:util';
import { rate } from '../accuracy/score';
import { wholeOption } from '../command-options';
import { percent, textTable } from '../text-table';
import type { AssessmentTime } from './assessment-time';
import { type AuditTime, timeAudit } from './audit-time';
import { measureExport, printExport } from './export-time';
import { compileRival, numpyRival, type Rival } from './rivals';
import { compareOn, longRecords, middle, type RecordResult, SAMPLES } from './stage-one';

/** The compiler as the target has it, and with everything it can do for this machine. */
const FLAGS = [['-O3'], ['-O3', '-march=native', '-ffast-math']];

void measure();

async function measure(): Promise<void> {
  const { values } = parseArgs({
    options: {
      records: { type: 'string', default: '10' },
      repeats: { type: 'string', default: '3' },
      lengths: { type: 'string', default: '1800,3600,14400,86400' },
      audit: { type: 'boolean', default: false },
      'audit-loops': { type: 'string', default: '1000' },
      'audit-samples': { type: 'string', default: '7200' },
      export: { type: 'boolean', default: false },
      megabytes: { type: 'string', default: '2000' },
      json: { type: 'string' },
    },
  });
  if (values.export) {
    const time = await measureExport(1e6 * wholeOption('megabytes', values.megabytes));
    say(printExport(time));
    write(values.json ?? inCache('export.json'), { export: time });
    return;
  }
  if (values.audit) {
    const loops = wholeOption('audit-loops', values['audit-loops']);
    const audit = await timeAudit(loops, wholeOption('audit-samples', values['audit-samples']));
    say(printAudit(audit));
    write(values.json ?? inCache('audit.json'), { audit });
    return;
  }
  const repeats = wholeOption('repeats', values.repeats);
  const records = wholeOption('records', values.records);
  const lengths = values.lengths.split(',').map((length) => wholeOption('lengths', length));
  const compiled = FLAGS.map(compileRival);
  const rivals = [...compiled, numpyRival()].filter((rival): rival is Rival => rival !== null);
  const searches: RecordResult[] = [];
  if (rivals.length === 0) say('No compiler and no NumPy: stage 1 has nothing to be compared with.');
  else {
    for (const record of longRecords(records)) {
      searches.push(compareOn(record, rivals, repeats));
      process.stderr.write(`${searches.length} records searched ...\n`);
    }
    say(printSearches(searches));
  }
  const assessments: AssessmentTime[] = [];
  for (const samples of lengths) {
    const runs: AssessmentTime[] = [];
    for (let turn = 0; turn < repeats; turn++) runs.push(await assessIn(samples));
    runs.sort((a, b) => a.seconds - b.seconds);
    assessments.push(runs[Math.floor((runs.length - 1) / 2)]);
    process.stderr.write(`${samples} samples assessed ...\n`);
  }
  say(printAssessments(assessments));
  write(values.json ?? inCache('speed.json'), {
    repeats,
    stageOne: summaryOf(searches),
    searches,
    assessments,
  });
}

function inCache(name: string): string {
  return join(__dirname, '../../.cache/speed', name);
}

function write(path: string, measured: object): void {
  const file = resolve(path);
  mkdirSync(dirname(file), { recursive: true });
  const machine = { node: process.version, processor: cpus()[0]?.model ?? null, cores: cpus().length };
  writeFileSync(file, `${JSON.stringify({ machine, ...measured }, null, 1)}\n`);
  say(`Written to ${file}`);
}

function say(text: string): void {
  process.stdout.write(`${text}\n`);
}

function assessIn(samples: number): Promise<AssessmentTime> {
  return new Promise((answered, failed) => {
    const worker = fork(join(__dirname, 'assessment-time.ts'));
    worker.on('message', answered);
    worker.on('exit', (code) =>
      failed(new Error(`The assessment of ${samples} samples ended with ${code}.`)),
    );
    worker.send(samples);
  });
}

/** Time of the fast search over that of each rival, median of the records, and where it finds what brute force finds. */
function summaryOf(searches: readonly RecordResult[]): {
  ratios: Record<string, number>;
  found: ReturnType<typeof rate>;
} {
  const names = Object.keys(searches[0]?.rivals ?? {});
  return {
    ratios: Object.fromEntries(
      names.map((name) => [name, middle(searches.map(({ fast, rivals }) => fast / rivals[name]))]),
    ),
    found: rate(
      searches.filter(({ variants }) => variants.every(({ found }) => found)).length,
      searches.length,
    ),
  };
}

function printSearches(searches: readonly RecordResult[]): string {
  const { ratios, found } = summaryOf(searches);
  const names = Object.keys(ratios);
  const places = ({ variants }: RecordResult): string[] =>
    variants.map(({ fast, brute, found }) =>
      found
        ? 'yes'
        : `${fast.s},${fast.j} not ${brute.s},${brute.j} (+${(fast.misfit - brute.misfit).toFixed(5)})`,
    );
  const table = textTable(
    `Stage 1, both variants, ${SAMPLES} samples: s, and whether S and J lie within a grid step of the best of all`,
    [
      'record',
      'service',
      'pairs',
      'lags',
      'delays',
      'fast',
      ...names,
      'slides-on',
      'sticks-again',
      'misfits off by',
    ],
    searches.map((one) => [
      one.id,
      one.service,
      String(one.pairs),
      String(one.lags),
      String(one.delays),
      one.fast.toFixed(3),
      ...names.map((name) => one.rivals[name].toFixed(3)),
      ...places(one),
      Math.max(...one.variants.map(({ furthestOff }) => furthestOff)).toExponential(1),
    ]),
  );
  const lines = names.map(
    (name) => `Time over that of ${name}: ${ratios[name].toFixed(3)} (median of records)`,
  );
  const share = `${percent(found.share)} [${percent(found.low, 0)}, ${percent(found.high, 0)}]`;
  return [
    table,
    ...lines,
    `Brute-force optimum found in both variants: ${share} of ${found.of} records (target at least 95 %)`,
    'Target: at most 0.25 times the time of C -O3\n',
  ].join('\n');
}

function printAssessments(assessments: readonly AssessmentTime[]): string {
  const steps = Object.keys(assessments[0]?.steps ?? {});
  const growth = (i: number): string => {
    if (i === 0) return '-';
    const [one, other] = [assessments[i - 1], assessments[i]];
    return `${(other.seconds / one.seconds).toFixed(2)} for ${(other.samples / one.samples).toFixed(2)}`;
  };
  return textTable(
    'A whole assessment in a fresh process, s (target: 3600 samples in 1 s; time grows no faster than samples)',
    ['samples', 'time', 'growth', 'processor', 'memory MB', ...steps],
    assessments.map((one, i) => [
      String(one.samples),
      one.seconds.toFixed(2),
      growth(i),
      one.processor.toFixed(2),
      one.memory.toFixed(0),
      ...steps.map((step) => one.steps[step].toFixed(3)),
    ]),
  );
}

function printAudit(audit: AuditTime): string {
  const { loops, samples, workers, seconds, memory } = audit;
  const { oneLoop, overIdeal, oneLoopOnOneCore, overIdealOnOneCore } = audit;
  const { early, late, most } = memory;
  const orNone = (value: number | null): string => value?.toFixed(3) ?? '-';
  const grown = ((100 * (late - early)) / early).toFixed(1);
  return [
    textTable(
      `An audit of ${loops} made loops of ${samples} samples by the built program, ${workers} workers`,
      [
        's',
        's a loop alone',
        'over ideal',
        'alone on one core',
        'over ideal',
        'MB early',
        'MB late',
        'growth %',
        'MB most',
      ],
      [
        [
          seconds.toFixed(1),
          oneLoop.toFixed(3),
          overIdeal.toFixed(3),
          orNone(oneLoopOnOneCore),
          orNone(overIdealOnOneCore),
          ...[early, late].map((value) => value.toFixed(0)),
          grown,
          most.toFixed(0),
        ],
      ],
    ),
    'Early: around a tenth of the loops. Late: from 95 % of them to the last but one. Targets: growth at most 10 %, time at',
    'most 1.2 times that of one loop x loops / workers. Alone, a loop has the other cores for its garbage and compiler.',
    '"Most" has the end in it, when groups and ranking are made.\n',
  ].join('\n');
}
