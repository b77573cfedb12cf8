/**
 * Service by the first letter of a tag against the identification letters of ANSI/ISA-5.1 (table of letters, column of
 * first letters: measured or initiating variable; values from memory, the same in its editions of 1984 and 2009).
 */
import { expect, test } from 'vitest';
import { isaTag, serviceOf } from '../../src/record/names';

const firstLetters: readonly (readonly [string, string])[] = [
  ['A', 'analysis'],
  ['B', 'burner, combustion'],
  ['C', "user's choice"],
  ['D', "user's choice"],
  ['E', 'voltage'],
  ['F', 'flow, flow rate'],
  ['G', "user's choice"],
  ['H', 'hand'],
  ['I', 'current'],
  ['J', 'power'],
  ['K', 'time, schedule'],
  ['L', 'level'],
  ['M', "user's choice"],
  ['N', "user's choice"],
  ['O', "user's choice"],
  ['P', 'pressure'],
  ['Q', 'quantity'],
  ['R', 'radiation'],
  ['S', 'speed, frequency'],
  ['T', 'temperature'],
  ['U', 'multivariable'],
  ['V', 'vibration, mechanical analysis'],
  ['W', 'weight, force'],
  ['X', 'unclassified'],
  ['Y', 'event, state, presence'],
  ['Z', 'position, dimension'],
];

/** The variables that are services of their own here; every other letter must name none. */
const services = new Map([
  ['flow, flow rate', 'flow'],
  ['level', 'level'],
  ['pressure', 'pressure'],
  ['temperature', 'temperature'],
]);

test.each(firstLetters)('%s stands for %s', (letter, variable) => {
  expect(serviceOf(isaTag(`31-${letter}C-104`)!.letters)).toBe(services.get(variable) ?? null);
});

test('the table has all 26 letters', () => {
  expect(firstLetters.map(([letter]) => letter).join('')).toBe('ABCDEFGHIJKLMNOPQRSTUVWXYZ');
});
