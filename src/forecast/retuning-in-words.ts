/** What the forecast says of retuning and repair, in sentences. */
import { duration } from '../assessment/make-answer-card';
import type { Forecast } from './forecast';

/** Below this the tuning is remarked upon; common practice asks for 2 and more, no source. */
const leastMargin = 2;

const share = (value: number): string => `${Math.round(100 * value)} %`;

export function retuningInWords(forecast: Omit<Forecast, 'inWords'>, pvUnit: string): string[] {
  const { map, now, withoutIntegral, integralDeadBand, repaired, record, retuningEndsIt } = forecast;
  const stable = map.flat().filter((place) => place.stable);
  const quiet = stable.filter((place) => !place.cycles);
  const said: string[] = [];
  if (stable.length > 0) {
    const tried = `of ${stable.length} stable settings of gain and integral time that were tried`;
    if (retuningEndsIt) {
      said.push(`The cycle ends at ${quiet.length} ${tried}; the valve stays as it is.`);
    } else {
      said.push(
        `Retuning does not remove this cycle: it goes on at ${stable.length - quiet.length} ${tried}.`,
        'Slower settings make the cycle slower, not absent.',
      );
      if (quiet.length > 0) {
        said.push(
          `At the other ${quiet.length === 1 ? 'one' : quiet.length} the valve moves so seldom that the cycle is not told from the drift of the load.`,
        );
      }
    }
  }
  if (withoutIntegral !== null) {
    said.push(
      withoutIntegral.cycles
        ? 'Without integral action it does not surely end: drift of the load keeps the valve going to and fro.'
        : 'Without integral action the cycle ends, at the price of a lasting error between PV and set point.',
    );
  }
  if (integralDeadBand !== null) {
    const width = `${Number(integralDeadBand.width.toPrecision(2))} ${pvUnit}`;
    said.push(
      integralDeadBand.found
        ? `An integral dead band of ${width} on either side of the set point ends it, at the price of an error of up to that much that stays.`
        : `An integral dead band of ${width} on either side of the set point does not surely end it (it cycles on in ${share(integralDeadBand.cyclesIn)} of the rival loops).`,
    );
  }
  const valve = repaired.S > 0 ? ` to S = ${repaired.S} % and J = ${repaired.J} %` : '';
  said.push(
    repaired.cycles
      ? `With the valve brought${valve} the loop still cycles.`
      : `With the valve repaired${valve} the cycle is gone; noise and drift leave PV a movement of ${share(repaired.pvSwing.value / record.pvSwing)} of today's swing within ${duration(record.period)}.`,
  );
  if (now.gainMargin !== null && now.gainMargin < leastMargin) {
    said.push(
      `The gain margin of the loop with a good valve is only ${now.gainMargin.toFixed(1)}: after the repair the tuning itself deserves a look.`,
    );
  }
  return said;
}
