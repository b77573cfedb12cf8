/** Makes the demo loops of data/ and the page that says what is true of each: `npm run data`. */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { DEMO_LOOPS, makeDemoLoop } from './demo-loops';
import { toCsv } from './export';
import { fitTruth } from './truth';

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
`,
);
