/** What share of its full flow a valve passes at a travel. */
import { WrongUse } from '../errors';

/**
 * Flow of an equal-percentage valve, % of full flow at constant pressure drop, at `travel` %: equal steps of travel
 * multiply the flow by equal factors, `rangeability` from 0 to 100 % travel (common practice: 30 to 50).
 *
 * @throws WrongUse for a rangeability of 1 or less
 */
export function equalPercentageFlow(travel: number, rangeability: number): number {
  if (!(rangeability > 1)) {
    throw new WrongUse(`The rangeability of a valve must be above 1. Received ${rangeability}.`);
  }
  return 100 * rangeability ** (travel / 100 - 1);
}
