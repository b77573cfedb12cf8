/** Friction as force and pressure: against the textbook valve's published parameters, and against mathjs. */
import { unit } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { WrongUse } from '../../src/errors';
import { type FrictionOptions, frictionInForce } from '../../src/forecast/friction-in-force';
import { TEXTBOOK_VALVE } from '../../src/valve/stem';
import { expectClose } from '../closeness';

const percent = '% of OP span';
const textbook = { springRate: '52538 N/m', stroke: '0.1016 m' } as const;

describe('the textbook valve', () => {
  // Kayihan, Doyle 2000 (values from memory): spring, stroke, static and Coulomb friction.
  const span = TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke;
  const S = (100 * (TEXTBOOK_VALVE.static + TEXTBOOK_VALVE.coulomb)) / span;
  const J = (100 * (TEXTBOOK_VALVE.static - TEXTBOOK_VALVE.coulomb)) / span;

  it('gets its static and Coulomb friction back from S = (Fs + Fc)/span and J = (Fs - Fc)/span', () => {
    const found = frictionInForce({ S, J, ...textbook });
    expectClose(found.atRest!.value, TEXTBOOK_VALVE.static, { relative: 1e-12 });
    expectClose(found.sliding!.value, TEXTBOOK_VALVE.coulomb, { relative: 1e-12 });
    expectClose(found.band.force.value, TEXTBOOK_VALVE.static + TEXTBOOK_VALVE.coulomb, { relative: 1e-12 });
    expectClose(found.drop!.force.value, TEXTBOOK_VALVE.static - TEXTBOOK_VALVE.coulomb, { relative: 1e-12 });
  });

  it('has the same span by 3-15 psi on its diaphragm as by its spring, within a few newtons', () => {
    const byPressure = frictionInForce({
      S,
      J,
      pressureRange: { low: '3 psi', high: '15 psi' },
      area: '0.06452 m2',
    });
    expectClose(byPressure.spanForce.value, span, { relative: 1e-3 });
    expect(byPressure.notes.map(({ code }) => code)).not.toContain('spans-differ');
  });

  it('says what its packing friction means in S and J', () => {
    const { packing } = frictionInForce({
      S: 1,
      J: 0,
      ...textbook,
      packingFriction: `${TEXTBOOK_VALVE.coulomb} N`,
      packingBreakaway: `${TEXTBOOK_VALVE.static} N`,
    });
    expectClose(packing!.S, S, { relative: 1e-12 });
    expectClose(packing!.J, J, { relative: 1e-12 });
  });
});

describe('units', () => {
  it('are those of mathjs, whichever way they are written', () => {
    const ways: Partial<FrictionOptions>[] = [
      { springRate: '300 lbf/in', stroke: '4 in' },
      { springRate: unit(300, 'lbf/in'), stroke: unit(4, 'in') },
      { pressureRange: { low: '0.2 bar', high: '1 bar' }, area: '645 cm2' },
      { pressureRange: { low: '3 psig', high: '15 psig' }, area: '100 in2' },
    ];
    const spans = [
      unit('300 lbf/in').toNumber('N/m') * unit('4 in').toNumber('m'),
      unit('300 lbf/in').toNumber('N/m') * unit('4 in').toNumber('m'),
      unit('0.8 bar').toNumber('Pa') * unit('645 cm2').toNumber('m2'),
      unit('12 psi').toNumber('Pa') * unit('100 sqin').toNumber('m2'),
    ];
    ways.forEach((way, i) => {
      const { spanForce } = frictionInForce({ S: 5, J: 1, ...way });
      expectClose(spanForce.value, spans[i]!, { relative: 1e-12 }, JSON.stringify(way));
      expect(spanForce.unit).toBe('N');
    });
  });

  it('of the answer can be chosen', () => {
    const options = { S: 10, J: 2, ...textbook, area: '645 cm2' };
    const si = frictionInForce(options);
    const other = frictionInForce({ ...options, forceUnit: 'lbf', pressureUnit: 'psi' });
    expectClose(other.band.force.value, unit(si.band.force.value, 'N').toNumber('lbf'), { relative: 1e-12 });
    expectClose(other.band.pressure!.value, unit(si.band.pressure!.value, 'kPa').toNumber('psi'), {
      relative: 1e-12,
    });
  });

  it.each([
    [{ springRate: '52 kN', stroke: '1 in' }, /springRate" must be in a unit of spring rate.*52 kN/],
    [{ springRate: '5 furlong/foo', stroke: '1 in' }, /springRate" needs a number with a unit/],
    [{ springRate: 'kN/m', stroke: '1 in' }, /springRate" must be/],
    [{ ...textbook, area: '3 bar' }, /area" must be in a unit of area/],
    [{ ...textbook, forceUnit: 'bar' }, /forceUnit" must be in a unit of force/],
    [{ ...textbook, packingFriction: '-4 N' }, /packingFriction" must be above 0/],
    [{ springRate: '52 kN/m' }, /needs a way to the force of the whole span/],
    [{ ...textbook, supplyPressure: '1 bar' }, /only together with pressureRange and area/],
    [{ ...textbook, packingBreakaway: '5 N' }, /packingBreakaway needs a packingFriction/],
    [{ ...textbook, spring: '5' }, /no option "spring"/],
  ] as [object, RegExp][])('or options that are wrong are refused: %j', (wrong, message) => {
    const run = (): unknown => frictionInForce({ S: 5, J: 1, ...wrong });
    expect(run).toThrow(WrongUse);
    expect(run).toThrow(message);
  });

  it('of S and J must be % of OP span, J not above S', () => {
    const inVolt = { value: 1, low: 1, high: 1, unit: 'V' };
    expect(() => frictionInForce({ S: inVolt, J: null, ...textbook })).toThrow(/in % of OP span/);
    expect(() => frictionInForce({ S: 1, J: 2, ...textbook })).toThrow(/J cannot be above S/);
  });
});

describe('intervals and thrust', () => {
  const S = { value: 4, low: 3, high: 5, unit: percent };

  it('carries the ends of S and J along', () => {
    const found = frictionInForce({ S, J: { value: 1, low: 0.5, high: 1.5, unit: percent }, ...textbook });
    const perPercent = found.spanForce.value / 100;
    expectClose(found.band.force.low, 3 * perPercent, { relative: 1e-12 });
    expectClose(found.band.force.high, 5 * perPercent, { relative: 1e-12 });
    expectClose(found.atRest!.high, (2.5 + Math.hypot(1, 0.5) / 2) * perPercent, { relative: 1e-12 });
    expect(found.sliding!.low).toBeLessThan(found.sliding!.value);
  });

  it('leaves friction at rest and while sliding open where J is not resolved', () => {
    const found = frictionInForce({ S, J: null, ...textbook });
    expect([found.atRest, found.sliding, found.drop]).toEqual([null, null, null]);
    expect(found.notes.map(({ code }) => code)).toContain('jump-not-resolved');
  });

  it('takes friction and flow from the thrust that the supply leaves beyond the spring', () => {
    const options = {
      S: 10,
      J: 2,
      pressureRange: { low: '0.2 bar', high: '1 bar' },
      area: '645 cm2',
      supplyPressure: '1.4 bar',
      flowForce: '500 N',
    };
    const { thrust, atRest } = frictionInForce(options);
    const spare = unit('0.4 bar').toNumber('Pa') * unit('645 cm2').toNumber('m2');
    expectClose(thrust!.spare, spare, { relative: 1e-9 });
    expectClose(thrust!.left.value, spare - 500 - atRest!.value, { relative: 1e-9 });
    const stated = frictionInForce({ ...options, spareThrust: '600 N' });
    expect(stated.thrust!.left.value).toBeLessThan(0);
    expect(stated.notes.map(({ code }) => code)).toContain('no-thrust-left');
  });

  it('tells when spring and pressure contradict each other', () => {
    const { notes } = frictionInForce({
      S: 5,
      J: 1,
      ...textbook,
      pressureRange: { low: '0.2 bar', high: '2 bar' },
      area: '645 cm2',
    });
    expect(notes.find(({ code }) => code === 'spans-differ')!.text).toMatch(/5340 N.*11600 N/);
  });
});
