import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { captured } from './captured';

describe('the command line', () => {
  it('prints the version that package.json has', async () => {
    const { version } = JSON.parse(readFileSync('package.json', 'utf8'));
    expect(await captured('--version')).toEqual({ code: 0, stdout: `${version}\n`, stderr: '' });
  });

  it('prints help on stdout, general and for each command', async () => {
    expect((await captured('--help')).stdout).toContain('stickband assess FILE');
    expect((await captured('assess', '--help')).stdout).toContain('--pv-range=LOW:HIGH');
    expect((await captured('audit', '--help')).stdout).toContain('--shard I/N');
    expect((await captured('merge', '--help')).stdout).toContain('audit-part-I-of-N.json');
    expect((await captured('notebook', '--help')).stdout).toContain('Opens Jupyter');
  });

  it('has every option that the README shows', async () => {
    const { stdout: general } = await captured('--help');
    const commands = [...general.matchAll(/^ {2}stickband ([a-z-]+)/gm)].map((match) => match[1]!);
    let help = '';
    for (const command of commands) help += (await captured(command, '--help')).stdout;
    const text = readFileSync('README.md', 'utf8').replace(/^sbatch [^']*/gm, ''); // has options of its own
    const shown = text.matchAll(/[ `](--[a-z-]+)(?=[ =`])/g);
    const options = [...new Set([...shown].map((match) => match[1]!))].filter((option) => option !== '--no');
    expect(options.length).toBeGreaterThan(5);
    for (const option of options) expect(help).toContain(option);
  });

  it.each([
    [[], /stickband assess FILE/],
    [['asess'], /no command "asess"\. Commands are: assess, audit, merge, .*notebook/],
    [['toString'], /no command "toString"/],
    [['assess'], /takes one FILE; none was received/],
    [['assess', 'a.csv', 'b.csv'], /takes one FILE; received were a\.csv, b\.csv/],
    [['assess', 'a.csv', '--sped', '3'], /Unknown option '--sped'.*--help/],
    [['assess', 'a.csv', '--seed'], /--seed.*--help/],
    [['assess', 'a.csv', '--seed', '1', '--seed', '2'], /--seed was given twice/],
    [
      ['assess', 'a.csv', '--dead-time', '3,5'],
      /--dead-time takes a number, with a point for decimals; "3,5"/,
    ],
    [['assess', 'a.csv', '--pv-range=120:0'], /--pv-range takes LOW:HIGH with LOW below HIGH.*"120:0"/],
    [['assess', 'a.csv', '--valve-range=0'], /--valve-range takes LOW:HIGH/],
    [
      ['assess', 'a.csv', '--service', 'flux'],
      /--service takes one of flow, pressure, level, temperature, other/,
    ],
    [['assess', 'a.csv', '--response', 'slow'], /--response takes one of self-regulating, integrating/],
    [['notebook', 'a.csv'], /takes no file; "a\.csv" was received/],
  ])('answers wrong use %j with exit code 2 and a sentence on stderr', async (words, sentence) => {
    const { code, stdout, stderr } = await captured(...words);
    expect(code).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toMatch(sentence);
  });
});
