/** `stickband audit`: many loops from a folder, a list or an export to one audit, or to one shard of it. */
import { rmdirSync, rmSync } from 'node:fs';
import { basename, dirname, extname, join, resolve } from 'node:path';
import { type FailedLoop, hasFailed } from '../audit/audit';
import { auditCsv } from '../audit/audit-csv';
import { auditFindings } from '../audit/audit-findings';
import {
  type AuditProgress,
  type FinishedRun,
  finishLoops,
  journalName,
  partOf,
  type RunOptions,
} from '../audit/audit-loops';
import { findLoops } from '../audit/find-loops';
import type { Shard } from '../audit/shard';
import { WrongUse } from '../errors';
import { auditText } from '../report/audit-text';
import { ensureJupyter } from '../report/jupyter';
import { defaultOutFolder } from '../report/places';
import type { Rendered } from '../report/render-notebook';
import { prepareFolder, writeWhole } from '../report/write-whole';
import { numberOption, readArguments, stated, wholeOption } from './arguments';
import { madeFiles, renderAudit } from './audit-pages';
import { draftMapTo } from './draft-map';
import { fileName } from './file-name';
import { auditHelp } from './help';
import type { Output } from './output';
import { startProgress } from './progress';

const optionTypes = {
  map: 'string',
  'draft-map': 'string',
  time: 'string',
  sp: 'string',
  pv: 'string',
  op: 'string',
  travel: 'string',
  mode: 'string',
  'time-format': 'string',
  zone: 'string',
  seed: 'string',
  out: 'string',
  json: 'string',
  workers: 'string',
  resume: 'boolean',
  shard: 'string',
  pages: 'string',
  'no-notebook': 'boolean',
  install: 'boolean',
  help: 'boolean',
} as const;

type Given = ReturnType<typeof readArguments<typeof optionTypes>>['values'];

/** Failed loops shown on the terminal at most; the JSON has all of them. */
const shownFailures = 5;

export async function audit(words: readonly string[], output: Output): Promise<void> {
  const { values, words: sources } = readArguments('audit', words, optionTypes);
  if (values.help) {
    output.stdout.write(`${auditHelp}\n`);
    return;
  }
  const source = oneSource(sources);
  if (values['draft-map'] !== undefined) {
    refuseOthers(values, 'draft-map');
    await draftMapTo(source, values['draft-map'], output);
    return;
  }
  const shard = values.shard === undefined ? null : shardOption(values.shard);
  const options = runOptions(values);
  const jsonAlone = values.json === '-';
  const jsonFile = values.json === undefined || jsonAlone ? null : resolve(values.json);
  const folder = resolve(values.out ?? join(defaultOutFolder(), `audit-${nameOf(source)}`));
  if (folder === resolve(source)) {
    throw new WrongUse(`The results of an audit cannot lie among its loops. Name another folder with --out.`);
  }
  const wantsNotebook = !shard && !values['no-notebook'] && (!jsonAlone || values.out !== undefined);
  const pages = pagesOption(values, wantsNotebook);
  const listed = findLoops(source, options.map ?? null, options.reading ?? {}).loops;
  if (jsonFile) prepareFolder(dirname(jsonFile));

  const say = (line: string): unknown => output.stderr.write(`${line}\n`);
  const jupyter = wantsNotebook ? ensureJupyter({ install: values.install, say }) : null;
  const progress = startProgress(output.stderr, 'quiet');
  let run: FinishedRun;
  try {
    run = await finishLoops(source, shard, {
      ...options,
      folder,
      onProgress: (moved) => progress(progressText(moved), moved.share),
    });
  } finally {
    progress.stop();
  }
  for (const sentence of run.leftOut) say(sentence);
  sayFailures(run, say);

  const findings = shard ? null : auditFindings(run);
  const json = `${JSON.stringify(findings?.audit ?? partOf(run), null, 2)}\n`;
  const journal = join(folder, journalName(shard));
  const kept = journal.replace(/jsonl$/, 'json');
  const numbers = [...(jsonAlone && values.out === undefined ? [] : [kept]), ...(jsonFile ? [jsonFile] : [])];
  const sheet = findings && numbers.includes(kept) ? kept.replace(/json$/, 'csv') : null;
  writeWhole({
    ...Object.fromEntries(numbers.map((path) => [path, json])),
    ...(findings && sheet ? { [sheet]: auditCsv(findings) } : {}),
  });
  let rendered: Rendered | null = null;
  if (findings && jupyter) {
    const rendering = startProgress(output.stderr, 'quiet');
    try {
      rendered = await renderAudit({
        jupyter,
        folder,
        name: nameOf(source),
        source,
        options,
        findings,
        listed,
        pages,
        onProgress: rendering,
      });
    } finally {
      rendering.stop();
    }
  }
  if (values.out === undefined) {
    // Nobody asked for the folder: with the audit complete, the same command may be given again.
    rmSync(journal);
    if (numbers.length === 0) removeIfEmpty(folder);
  }
  const summary = findings
    ? auditText(findings.audit)
    : `Shard ${run.shard} of ${run.of}: ${run.loops.length} of ${run.allLoops} loops. "stickband merge" puts the shards together.`;
  const lines = [summary, ...madeFiles({ rendered, sheet, numbers })];
  (jsonAlone ? output.stderr : output.stdout).write(`${lines.join('\n')}\n`);
  if (jsonAlone) output.stdout.write(json);
}

/** How many loops get a page of their own. */
function pagesOption({ pages, map }: Given, wantsNotebook: boolean): number {
  if (pages === undefined) return 0;
  const count = wholeOption('pages', pages);
  if (!wantsNotebook) {
    throw new WrongUse(
      '--pages makes pages that the page of the audit links to, and no such page is made here: not with ' +
        '--no-notebook, not for a shard, and with --json - only into a folder named with --out.',
    );
  }
  if (map !== undefined) {
    throw new WrongUse(
      '--pages needs one file a loop: a folder or a list. Leave it out for an export with a map.',
    );
  }
  return count;
}

function oneSource(sources: readonly string[]): string {
  if (sources.length === 1) return sources[0]!;
  const received = sources.length === 0 ? 'none was received' : `received were ${sources.join(', ')}`;
  throw new WrongUse(
    `stickband audit takes one FOLDER, LIST or EXPORT; ${received}. "stickband audit --help" says more.`,
  );
}

/** An option that does something else than an audit stands alone. */
function refuseOthers(values: Given, name: keyof Given): void {
  const others = Object.keys(values).filter((other) => other !== name);
  if (others.length > 0) throw new WrongUse(`--${name} stands alone; leave out --${others.join(', --')}.`);
}

function runOptions(values: Given): RunOptions {
  const { map, resume, time, sp, pv, op, travel, mode, zone } = values;
  return stated({
    map,
    resume,
    reading: stated({ time, sp, pv, op, travel, mode, timeFormat: values['time-format'], zone }),
    workers: values.workers === undefined ? undefined : wholeOption('workers', values.workers),
    seed: values.seed === undefined ? undefined : numberOption('seed', values.seed),
  });
}

function shardOption(text: string): Shard {
  const found = /^(\d+)\/(\d+)$/.exec(text);
  if (!found) throw new WrongUse(`--shard takes i/n, e.g. --shard 2/8; "${text}" was received.`);
  return { shard: Number(found[1]), of: Number(found[2]) };
}

function nameOf(source: string): string {
  const path = resolve(source);
  return fileName(basename(path, extname(path))) || 'unit';
}

function progressText({ step, finished, loops, failed, timeLeft }: AuditProgress): string {
  const done = step === 'assessing' ? `${finished} of ${loops} loops` : step;
  const some = failed > 0 ? `, ${failed} failed` : '';
  return `${done}${some}${timeLeft === null ? '' : `, ${duration(timeLeft)} left`}`;
}

function duration(seconds: number): string {
  if (seconds < 90) return `${Math.ceil(seconds)} s`;
  if (seconds < 5400) return `${Math.round(seconds / 60)} min`;
  return `${(seconds / 3600).toFixed(1)} h`;
}

function sayFailures({ loops }: FinishedRun, say: (line: string) => unknown): void {
  const failed = loops
    .map(({ result }) => result)
    .filter((result): result is FailedLoop => hasFailed(result));
  if (failed.length === 0) return;
  say(`${failed.length} of ${loops.length} loops failed:`);
  for (const { loop, file, error } of failed.slice(0, shownFailures)) say(`  ${loop} (${file}): ${error}`);
  if (failed.length > shownFailures)
    say(`  and ${failed.length - shownFailures} more; the JSON has all of them.`);
}

function removeIfEmpty(folder: string): void {
  try {
    rmdirSync(folder);
  } catch {
    // something else lies in it
  }
}
