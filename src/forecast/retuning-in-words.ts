/** What the forecast says of retuning and repair, in sentences. */
import { duration } from '../assessment/make-answer-card';
import type { CycleForecast, Forecast } from './forecast';

const share = (value: number): string => `${Math.round(100 * value)} %`;

export function retuningInWords(forecast: Omit<Forecast, 'inWords'>): string[] {
  const { map, now, withoutIntegral, integralDeadBand, repaired, record } = forecast;
  const stable = map.flat().filter((place) => place.stable);
  const quiet = stable.filter((place) => !place.cycles);
  const said: string[] = [];
  if (stable.length > 0) {
    if (quiet.length === 0) {
      said.push(
        `Retuning does not remove this cycle: it goes on at all ${stable.length} stable settings of gain and integral time that were tried. Slower settings make it slower, not absent.`,
      );
    } else {
      said.push(
        `The cycle ends at ${quiet.length} of ${stable.length} stable settings of gain and integral time that were tried; the valve still does not move within its dead band there.`,
      );
    }
  }
  if (withoutIntegral !== null) {
    said.push(
      withoutIntegral.cycles
        ? 'Without integral action it cycles as well.'
        : 'Without integral action the cycle ends, at the price of a lasting error between PV and set point.',
    );
  }
  if (integralDeadBand !== null) {
    const width = `${Number(integralDeadBand.width.toPrecision(2))} PV units`;
    said.push(
      integralDeadBand.found
        ? `An integral dead band of ${width} ends it, at the price of an error of up to that much that stays.`
        : `An integral dead band of ${width} does not surely end it (it cycles on in ${share(integralDeadBand.cyclesIn)} of the rival loops).`,
    );
  }
  said.push(
    repaired.cycles
      ? `With the valve at S = ${repaired.S} % and J = ${repaired.J} % the loop still cycles.`
      : `With the valve repaired${repaired.S > 0 ? ` to S = ${repaired.S} % and J = ${repaired.J} %` : ''} the cycle is gone; noise and drift leave a PV swing of ${change(repaired, record.pvSwing)} of today's within ${duration(record.period)}.`,
  );
  if (now.gainMargin !== null && now.gainMargin < 1.5) {
    said.push(
      `The gain margin without the valve's fault is only ${now.gainMargin.toFixed(1)}: after the repair the tuning itself deserves a look.`,
    );
  }
  return said;
}

function change({ pvSwing }: CycleForecast, today: number): string {
  return share(pvSwing.value / today);
}
