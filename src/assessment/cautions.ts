/** The cautions that go with every answer, in every output. This is the one place where they are worded. */
export const cautions: readonly string[] = [
  'These figures are estimates from operating data. They are not a test of the valve.',
  'The record cannot tell which part of the final control assembly sticks: stem and packing, actuator, positioner, I/P, air supply or linkage.',
  'A manual test or a change of tuning moves a live process. Agree it with operations first and stay inside the PV limits they set.',
  'Nothing here replaces site safety procedures, permits to work, management of change, or the rules for bypasses and interlocks.',
  'Local codes, site procedures and licensed or authorised people decide what is done.',
];
