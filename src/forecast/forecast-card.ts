/** The card of a forecast: what retuning or repair would do, as short plain sentences. */
import { duration, withInterval } from '../assessment/make-answer-card';
import type { TestCard } from '../field-test/test-card';
import type { CycleForecast, ForecastResult } from './forecast';

/** Stands on the card, the map and every table of settings. */
export const notToLoad = 'Not settings to load; management of change applies.';

export function forecastCard(result: ForecastResult): TestCard {
  const { loop, forecast, refused, notes, cautions } = result;
  const base = { loop, label: 'forecast, not a test', cautions };
  if (forecast === null) {
    return {
      ...base,
      headline: `No forecast for ${loop}.`,
      lead: refused[0] ?? '',
      figures: [],
      parts: refused.length > 1 ? [{ title: 'Also', sentences: refused.slice(1) }] : [],
    };
  }
  const { now, error, record, repaired, integralDeadBand, retuningEndsIt, balance, rivals } = forecast;
  const unit = now.pvSwing.unit;
  const off = (share: number): string => {
    const percent = Math.round(100 * share);
    return `${percent > 0 ? '+' : ''}${percent === 0 ? 0 : percent} %`;
  };
  const remedies = [
    retuningEndsIt ? 'Retuning may end' : 'Retuning does not end',
    `the cycle of ${loop};`,
    repaired.cycles ? 'a valve as stated would not either.' : 'a repaired valve does.',
  ];
  return {
    ...base,
    headline: remedies.join(' '),
    lead: forecast.inWords[0] ?? '',
    figures: [
      {
        label: 'Cycle now, in the record',
        value: `${duration(record.period)}, PV ${short(record.pvSwing)} ${unit}, OP ${short(record.opSwing)} %`,
        note: `simulated: period ${off(error.period)}, PV swing ${off(error.pvSwing)}, OP swing ${off(error.opSwing)}`,
      },
      ...forecast.others.map((other) => ({
        label: `Gain ${short(other.gain)}${other.integralTime === null ? ', no integral action' : `, integral time ${duration(other.integralTime)}`}`,
        value: cycleText(other),
        note: notToLoad,
      })),
      {
        label: 'Valve repaired',
        value: cycleText(repaired),
        note: `S = ${repaired.S} %, J = ${repaired.J} %; what noise and drift leave within ${duration(record.period)}`,
      },
      ...(integralDeadBand === null
        ? []
        : [
            {
              label: 'Integral dead band',
              value: integralDeadBand.found
                ? `${short(integralDeadBand.width)} ${unit} ends it`
                : `${short(integralDeadBand.width)} ${unit} does not surely end it`,
              note: 'an error of up to that width stays',
            },
          ]),
    ],
    parts: [
      { title: 'What the forecast says', sentences: forecast.inWords.slice(1) },
      {
        title: 'How far to trust it',
        sentences: [
          `Intervals are 90 %, from the ${rivals.used} of ${rivals.drawn} rival loops (pairs of S and J with the process that fits them) that come nearest to the record.`,
          balance === null
            ? 'The describing function finds no cycle at these settings although the loop has one; it is rough, as a stick-slip cycle is far from a sine.'
            : `The describing function says ${duration(balance.period)}, PV ${short(balance.pvSwing)} ${unit}, OP ${short(balance.opSwing)} %; it is rough (own simulations of two published loops: up to 40 % off in period).`,
          'The forecast holds at the load of the record, with a constant set point.',
          notToLoad,
          ...notes.map(({ text }) => text),
        ],
      },
    ],
  };
}

function cycleText({ cycles, period, pvSwing }: CycleForecast): string {
  if (!cycles || period === null) return `no cycle; PV within ${withInterval(pvSwing)}`;
  return `every ${duration(period.value)} (${duration(period.low)} to ${duration(period.high)}), PV ${withInterval(pvSwing)}`;
}

function short(value: number): string {
  return String(Number(value.toPrecision(3)));
}
