/** Makes the demo loops and the demo unit of data/ and the page that says what is true of each: `npm run data`. */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { DEMO_LOOPS, makeDemoLoop } from './demo-loops';
import { type MadeUnitLoop, makeDemoUnit, unitFolder, unitList, unitListFile } from './demo-unit';
import { toCsv } from './export';
import { makeTightenedValve, TIGHTENED_VALVE } from './tightened-valve';
import { fitTruth } from './truth';
import { makeValveTests, testedValve } from './valve-tests';

const folder = join(__dirname, '..');
const rows: string[] = [];
for (const demo of DEMO_LOOPS) {
  const made = makeDemoLoop(demo.name, demo.seed);
  writeFileSync(join(folder, `${demo.name}.csv`), toCsv(made, demo.seed));
  const truth = fitTruth(made.run.op, made.run.travel, demo.built);
  if (truth === null) throw new Error(`The valve of ${demo.name} does not move.`);
  const hours = (made.run.time.length * demo.samplePeriod) / 3600;
  rows.push(
    `| ${demo.name}.csv | ${demo.cause} | ${demo.story} | ${hours} h, every ${demo.samplePeriod} s | ` +
      `${demo.pvRange.low} to ${demo.pvRange.high} ${demo.pvUnit} | ${truth.S.toFixed(2)} | ${truth.J.toFixed(2)} | ` +
      `${(100 * truth.explains).toFixed(1)} % |`,
  );
}

const unit = makeDemoUnit();
mkdirSync(join(folder, unitFolder), { recursive: true });
for (const made of unit) {
  writeFileSync(join(folder, unitFolder, `${made.demo.tag}.csv`), toCsv(made, made.demo.seed));
}
writeFileSync(join(folder, unitListFile), unitList());

const valveTests = makeValveTests();
for (const { name, csv } of valveTests) writeFileSync(join(folder, `${name}.csv`), csv);

const tightened = makeTightenedValve();
writeFileSync(join(folder, `${TIGHTENED_VALVE.name}.csv`), toCsv(tightened, TIGHTENED_VALVE.seed));

/** S and J of the tightened valve over a part of its record, samples. */
function truthBetween(from: number, to: number, built: { readonly S: number; readonly J: number }): string {
  const { op, travel } = tightened.run;
  const truth = fitTruth(op.slice(from, to), travel.slice(from, to), built);
  if (truth === null) throw new Error('The valve that is tightened does not move.');
  return `${truth.S.toFixed(2)} | ${truth.J.toFixed(2)}`;
}
const tightenedSample = TIGHTENED_VALVE.tightenedAt / TIGHTENED_VALVE.samplePeriod;

/** A row of the unit's table: S and J as in the table above, dashes where the valve is not to blame. */
function unitRow({ demo, run }: MadeUnitLoop): string {
  const minutes = Math.round((demo.samples * demo.samplePeriod) / 60);
  const truth = fitTruth(run.op, run.travel, demo.built);
  const told = demo.built.S >= 1 && truth !== null ? [truth.S.toFixed(2), truth.J.toFixed(2)] : ['-', '-'];
  return `| ${demo.tag} | ${demo.cause} | ${demo.story} | ${minutes} min, every ${demo.samplePeriod} s | ${told.join(' | ')} |`;
}

writeFileSync(
  join(folder, 'README.md'),
  `# Demo loops

All of these are invented. They come from the water-recovery section (area 31) of a starch works that does not exist;
no real plant, valve or record stands behind them. \`npm run data\` makes them again, byte for byte, with the stem
(moving mass, spring, Stribeck friction, actuator lag, worn linkage) and the loop simulator of \`src/valve\` and
\`src/process\`, and writes this page.

What is true of each:

| file | cause of the cycle | what it is | record | PV range | S, % | J, % | explained |
|---|---|---|---|---|---|---|---|
${rows.join('\n')}

S (dead band plus stick band) and J (slip jump) are those of the two-parameter element that comes closest to the
valve's *true travel* for the same OP: both variants, several starts, started at the true position, the first tenth of
the record not counted (\`data/make/truth.ts\`). "Explained" is the share of the true travel's variance that this element
accounts for. S and J of the good valves are small and say little; they are there to show that. The true travel is
exported for 31-FC-104-with-travel alone, with the noise of a position transmitter.

Columns: \`time\` (ISO 8601, UTC), then \`TAG.SP\` and \`TAG.PV\` in the unit of the PV range, \`TAG.OP\` in % of span,
\`TAG.TRAVEL\` in % where it is logged, \`TAG.MODE\`.

## A valve that gets worse

\`${TIGHTENED_VALVE.name}.csv\`, ${(TIGHTENED_VALVE.samples * TIGHTENED_VALVE.samplePeriod) / 3600} h, every ${TIGHTENED_VALVE.samplePeriod} s, PV range ${TIGHTENED_VALVE.pvRange.low} to ${TIGHTENED_VALVE.pvRange.high} ${TIGHTENED_VALVE.pvUnit}. ${TIGHTENED_VALVE.story} For S and J over time.

| part | S, % | J, % |
|---|---|---|
| before | ${truthBetween(0, tightenedSample, TIGHTENED_VALVE.before)} |
| after | ${truthBetween(tightenedSample, TIGHTENED_VALVE.samples, TIGHTENED_VALVE.after)} |

## Demo unit

${unit.length} loops of the same invented area over the same hours, in \`${unitFolder}/\`, for an audit; \`${unitListFile}\` is the
list of them with service, response and PV range. The valve of 31-FC-201 sticks and shakes 31-PC-202, 31-LC-203 and
31-TC-204: its PV reaches each of them through a lag and a dead time of the process between. 31-FC-241 and 31-PC-242 are
shaken by one and the same thing outside these loops, which nobody logs. 31-FC-251 is logged so seldom that no verdict can
be asked of it. S and J (of the valves that are to blame) are found as above.

| tag | cause of the cycle | what it is | record | S, % | J, % |
|---|---|---|---|---|---|
${unit.map(unitRow).join('\n')}

## Tests of a valve

The sticky valve of 31-FC-104 as it was tested, S and J built in as ${testedValve.S} % and ${testedValve.J} %, an actuator of
${1e4 * testedValve.area} cm2 behind a lag of ${testedValve.actuatorLag} s, rated travel 101.6 mm:

| file | what it is |
|---|---|
${valveTests.map(({ name, story }) => `| ${name}.csv | ${story} |`).join('\n')}
`,
);
