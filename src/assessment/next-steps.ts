/** What to do next for each cause, in the order in which it is done, each step with its caution. */
import type { Cause, NextStep, Verdict } from './assessment';

const holdTest: NextStep = {
  do: 'With the consent of operations and inside PV limits agreed with them, hold the controller in manual at constant OP for three to five periods.',
  why: 'A cycle that dies was made in the loop; one that stays comes from outside.',
  caution:
    'A loop in manual does not control: someone watches the PV all the time and returns it to automatic at the agreed limit. Not for loops with a safety function or in a trip path without the site’s own procedure.',
};

const gainTest: NextStep = {
  do: 'Only after that, and under management of change, reduce the controller gain a little and see whether the period moves.',
  why: 'A stiction cycle and a tuning cycle change their period with the gain; an outside cycle keeps it.',
  caution: 'Reduce, never raise. In an integrating loop a lower gain can also enlarge the swing.',
};

const valveTest: NextStep = {
  do: 'Plan a valve test: small steps of OP in one direction, then a reversal, with travel watched at the stem.',
  why: 'It measures the dead band (S) and the resolution (J) of the assembly directly.',
  caution:
    'It moves a live process: permit, agreed limits and a person at the valve, as the site prescribes.',
};

const steps: Record<Verdict, readonly NextStep[]> = {
  stiction: [
    holdTest,
    valveTest,
    {
      do: 'Raise a work request for the final control assembly.',
      why: 'Air supply, positioner, linkage, actuator and packing can all make this cycle; retuning does not remove it.',
      caution:
        'Isolation, bypass and work on the valve follow the site’s permit and the maker’s instructions.',
    },
  ],
  'lost-motion': [
    holdTest,
    valveTest,
    {
      do: 'Have linkage, stem connection and positioner feedback checked for play.',
      why: 'Dead band without a jump makes an integrating loop cycle under integral action.',
      caution: 'Moving parts and stored energy: work on the assembly only under the site’s permit.',
    },
  ],
  'tight-tuning': [
    holdTest,
    gainTest,
    {
      do: 'Review the tuning of the loop.',
      why: 'The cycle looks like a lightly damped linear loop.',
      caution: 'New settings go in under management of change, by authorised people, and are watched.',
    },
  ],
  'outside-disturbance': [
    holdTest,
    {
      do: 'Look for loops upstream that cycle with the same period.',
      why: 'A cycle that comes from outside is removed at its source.',
      caution: 'Tests on another loop need the consent of those who run it.',
    },
  ],
  'not-oscillating': [],
  'cannot-tell': [holdTest, gainTest],
};

export function nextSteps(cause: Cause, recordToAskFor: string): NextStep[] {
  const chosen = [...steps[cause.verdict]];
  if (cause.verdict === 'cannot-tell') {
    chosen.unshift({
      do: recordToAskFor,
      why: 'This record does not decide.',
      caution: 'Changing what the historian stores is itself a change: agree it with its owner.',
    });
  }
  return chosen;
}
