/** The cautions that go with every answer, in every output. This is the one place where they are worded. */
export const cautions: readonly string[] = [
  'These figures are estimates from operating data. They are not a test of the valve.',
  'The record cannot tell which part of the final control assembly sticks: stem and packing, actuator, positioner, I/P, air supply or linkage.',
  'A manual test or a change of tuning moves a live process. Agree it with operations first and stay inside the PV limits they set.',
  'Nothing here replaces site safety procedures, permits to work, management of change, or the rules for bypasses and interlocks.',
  'Local codes, site procedures and licensed or authorised people decide what is done.',
];

/** The cautions that go with every reading and every plan of a valve test: the test itself, then what holds for all work. */
export const valveTestCautions: readonly string[] = [
  'A reading holds for the load, supply pressure and temperature of the test. It is no acceptance test and no certificate.',
  ...cautions.slice(1),
  'Keep clear of the moving stem: springs and air in the actuator hold energy even when the command is still.',
];
