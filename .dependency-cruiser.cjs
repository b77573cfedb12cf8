/** Imports go one way. Each room lists the rooms it may import from; its own is always allowed. */
const rooms = {
  signal: [],
  valve: ['signal'],
  process: ['signal', 'valve'],
  oscillation: ['signal'],
  record: ['signal', 'oscillation', 'process'],
  estimate: ['signal', 'valve', 'process', 'oscillation', 'record'],
  evidence: ['signal', 'oscillation', 'record', 'valve'],
  cause: ['signal', 'oscillation', 'record', 'process', 'evidence', 'estimate', 'assessment'],
  assessment: ['signal', 'valve', 'process', 'oscillation', 'record', 'evidence', 'estimate', 'cause'],
  audit: ['signal', 'process', 'oscillation', 'record', 'estimate', 'assessment'],
  'field-test': ['signal', 'valve', 'process', 'oscillation', 'record', 'estimate', 'assessment'],
  forecast: ['signal', 'valve', 'process', 'oscillation', 'record', 'estimate', 'assessment', 'field-test'],
  figures: [
    'signal',
    'valve',
    'process',
    'oscillation',
    'record',
    'evidence',
    'estimate',
    'cause',
    'assessment',
    'audit',
    'field-test',
    'forecast',
  ],
  notebook: [
    'figures',
    'assessment',
    'audit',
    'field-test',
    'forecast',
    'report',
    'record',
    'estimate',
    'evidence',
    'oscillation',
  ],
  report: ['figures', 'assessment', 'audit', 'field-test', 'forecast', 'record'],
  cli: ['record', 'assessment', 'audit', 'field-test', 'report', 'process', 'estimate'],
};

const oneWay = Object.entries(rooms).map(([room, allowed]) => ({
  name: `${room}-imports-one-way`,
  severity: 'error',
  from: { path: `^src/${room}/` },
  to: { path: '^src/', pathNot: [`^src/(${[room, ...allowed].join('|')})/`, '^src/(errors|version)\\.ts$'] },
}));

const onlyIn = (name, packages, places) => ({
  name,
  severity: 'error',
  from: { pathNot: `^src/(${places})` },
  to: { path: `node_modules/(${packages})/` },
});

module.exports = {
  forbidden: [
    ...oneWay,
    { name: 'no-circles', severity: 'error', from: {}, to: { circular: true } },
    { name: 'no-orphans', severity: 'error', from: { orphan: true, pathNot: '\\.d\\.ts$' }, to: {} },
    onlyIn('tslab-only-in-notebook', 'tslab', 'notebook/'),
    onlyIn('danfo-only-in-record-and-notebook', 'danfojs', '(record|notebook)/'),
    onlyIn('plotly-only-in-notebook-and-report', 'plotly.js-cartesian-dist-min|jsdom', '(notebook|report)/'),
  ],
  options: {
    tsConfig: { fileName: 'tsconfig.json' },
    tsPreCompilationDeps: true,
    doNotFollow: { path: 'node_modules' },
  },
};
