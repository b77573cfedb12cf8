/** What to agree before a valve is tested, and when to stop: common practice, no source. Site procedures go before it. */
import type { PlannedTest } from './valve-test-plan';

export const checkList: readonly string[] = [
  'Permit to work and whatever else the site asks for; this proposal is released by authorised people, or it is not made.',
  'Consent of operations for this hour and load; who watches PV, who moves OP, who stands at the valve.',
  'Interlocks and trips that read this PV or act on this valve: known, and not touched by the test. A bypass only under the site’s own rule for bypasses.',
  'Cascade: the loop is taken out of cascade or remote set point, its master is told, and so are loops that feed forward from it or to it.',
  'The hand valve or bypass line around the control valve: where it stands, and that nobody moves it meanwhile.',
  'Fail position of the valve, and what the process does if air or signal is lost during the test.',
  'Stored energy: compressed spring and air in the actuator. Nobody opens, loosens or leans on anything; a stem may jump.',
  'Keep clear of the moving stem, linkage and position indicator; guards stay on.',
  'Radio or line of sight between valve and panel, tested before; no contact means stop.',
  'Who may call the test off: everybody. How: OP back to its start value, or the controller to automatic at once.',
  'Logging: command, travel or PV (and actuator pressure where there is a port) uncompressed, at least ten samples in each hold.',
  'Bumpless return: set point brought to PV, OP tracked, then automatic; then watched for some periods.',
];

export function stopSentences(tests: readonly PlannedTest[], unit: string): string[] {
  const at = (value: number): string => `${Number(value.toPrecision(4))} ${unit}`.trim();
  const ends = tests.map(({ kind, stopPv }) => `${kind} test: ${at(stopPv.low)} or ${at(stopPv.high)}`);
  return [
    `PV reaches its stop values (${ends.join('; ')}), or moves faster than expected: return to automatic at once, do not wait for the limit.`,
    'An alarm comes, another loop is upset, or the load changes.',
    'The stem does not move after steps that add up to more than planned: stop, do not push on. A stem that lets go all at once is a hazard.',
    'Contact between valve and panel is lost, or anybody calls stop.',
  ];
}
