/**
 * The public face of stickband: everything a notebook or a program calls. `readLoop` and `assessLoop` are the whole
 * way; the functions between them can be called one by one.
 */
export type { AnswerCard, Decision } from './assessment/answer-card';
export { type AssessOptions, assessLoop } from './assessment/assess-loop';
export type {
  Assessment,
  Cause,
  ControllerFound,
  Evidence,
  NextStep,
  Verdict,
} from './assessment/assessment';
export { cautions, valveTestCautions } from './assessment/cautions';
export type { Findings } from './assessment/findings';
export { answerCard } from './assessment/make-answer-card';
export type { Audit, AuditPart, FailedLoop, FinishedLoop, LoopGroup, RankedLoop } from './audit/audit';
export { hasFailed } from './audit/audit';
export { type AuditCard, auditCard } from './audit/audit-card';
export { auditCsv } from './audit/audit-csv';
export { type AuditFindings, auditFindings, type RankedFindings } from './audit/audit-findings';
export {
  type AuditOptions,
  type AuditProgress,
  auditLoops,
  auditOf,
  type FinishedRun,
  finishLoops,
  partOf,
  type RunOptions,
} from './audit/audit-loops';
export { type GroupOptions, groupLoops } from './audit/group-loops';
export { type MergedRun, mergeAudits, mergedRun } from './audit/merge-audits';
export {
  type RankingRule,
  type RankOptions,
  rankingRule,
  rankLoops,
  type SeverityPart,
} from './audit/rank-loops';
export { readAuditPart } from './audit/read-part';
export type { Shard } from './audit/shard';
export type { CycleClock, LoopPicture, LoopSignature } from './audit/signature';
export { draftMap } from './audit/sources/draft-map';
export type { ExportMap, MappedLoop } from './audit/sources/export-map';
export { mapText, readMap } from './audit/sources/read-map';
export { readSpooled } from './audit/sources/read-spooled';
export { spoolExport } from './audit/sources/spool-export';
export type { SpooledLoop } from './audit/sources/spooled-loop';
export type { Change } from './audit/stiction-change';
export {
  type StictionTrack,
  type StictionWindow,
  type TrackOptions,
  trackStiction,
} from './audit/track-stiction';
export { type CauseInput, nameCause } from './cause/name-cause';
export { MissingTool, StickbandError, UnreadableInput, UnwritableOutput, WrongUse } from './errors';
export { type FitOptions, fitStiction } from './estimate/fit-stiction';
export type {
  Estimate,
  FoundProcess,
  MisfitMap,
  Slip,
  StictionFit,
  StictionResult,
  ValveTest,
} from './estimate/stiction-fit';
export type { ActuatorFriction, FrictionAmount } from './field-test/actuator-friction';
export {
  type FittedLaw,
  type FrictionCurve,
  type FrictionCurvePoint,
  type FrictionLawName,
  stemPoints,
} from './field-test/friction-curve';
export { planCard } from './field-test/plan-card';
export { planValveTest } from './field-test/plan-valve-test';
export {
  type ReadValveTestOptions,
  readValveTest,
  type ValveTestFindings,
} from './field-test/read-valve-test';
export { readingCard } from './field-test/reading-card';
export {
  type SimulatedStroke,
  type SimulateStrokeOptions,
  simulateStroke,
} from './field-test/simulate-stroke';
export type { TestCard } from './field-test/test-card';
export { type ReadTestOptions, readTestRecord, type TestRecord } from './field-test/test-record';
export type {
  PlannedMove,
  PlannedTest,
  PlanRefusal,
  TypedValve,
  ValveTestLimits,
  ValveTestPlan,
} from './field-test/valve-test-plan';
export type { StepRead, ValveTestKind, ValveTestReading } from './field-test/valve-test-reading';
export { cycleFigure } from './figures/cycle-figure';
export { evidenceFigure } from './figures/evidence-figure';
export type { Figure } from './figures/figure';
export { fitFigure } from './figures/fit-figure';
export { forecastFigure } from './figures/forecast-figure';
export { forecastMapFigure } from './figures/forecast-map-figure';
export { forecastTrendFigure } from './figures/forecast-trend-figure';
export { misfitFigure } from './figures/misfit-figure';
export { periodMapFigure } from './figures/period-map-figure';
export { phaseFigure } from './figures/phase-figure';
export { repairComparisonFigure } from './figures/repair-comparison-figure';
export { stictionOverTimeFigure } from './figures/stiction-over-time-figure';
export { strokeFrictionFigure } from './figures/stroke-friction-figure';
export { strokePressureFigure } from './figures/stroke-pressure-figure';
export { testLoopFigure } from './figures/test-loop-figure';
export { testPlanFigure } from './figures/test-plan-figure';
export { testResponseFigure } from './figures/test-response-figure';
export { testTrendFigure } from './figures/test-trend-figure';
export { travelFigure } from './figures/travel-figure';
export { trendFigure } from './figures/trend-figure';
export { valveLoopFigure } from './figures/valve-loop-figure';
export type { DeadBandBound } from './forecast/bound-dead-band';
export {
  type ComparedRow,
  type CompareOptions,
  compareAssessments,
  type RepairAnswer,
  type RepairComparison,
} from './forecast/compare-assessments';
export { comparisonCard } from './forecast/comparison-card';
export type {
  BalanceForecast,
  CycleForecast,
  Forecast,
  ForecastResult,
  MapPlace,
  SettingForecast,
} from './forecast/forecast';
export { forecastCard } from './forecast/forecast-card';
export { type ControllerSetting, type ForecastOptions, forecastCycle } from './forecast/forecast-cycle';
export { type FrictionInForce, type FrictionOptions, frictionInForce } from './forecast/friction-in-force';
export {
  auditNoteTable,
  auditProvenanceTable,
  failedTable,
  rankingRuleTable,
  rankingTable,
  recordTable,
} from './notebook/audit-tables';
export { canMakeDataFrames, dataFrame } from './notebook/data-frame';
export { demoFile } from './notebook/demo-file';
export { comparisonTable, forceTable, forecastTable } from './notebook/forecast-tables';
export {
  type ShowTableOptions,
  showAnswer,
  showCautions,
  showFigure,
  showFitness,
  showNextSteps,
  showReasons,
  showSetUp,
  showTable,
} from './notebook/show';
export { showAuditAnswer, showGroups, showRanking } from './notebook/show-audit';
export { showComparison, showForecast } from './notebook/show-forecast';
export { showValveTest, showValveTestCautions, showValveTestPlan } from './notebook/show-valve-test';
export {
  cycleTable,
  estimateTable,
  evidenceTable,
  fitnessTable,
  noteTable,
  provenanceTable,
  slipTable,
} from './notebook/tables';
export {
  frictionLawTable,
  frictionTable,
  planTable,
  stepTable,
  testFileTable,
  testTable,
} from './notebook/valve-test-tables';
export type { Cycle, SingleCycle } from './oscillation/cycle';
export { findCycle } from './oscillation/find-cycle';
export { type LoopOptions, type LoopRun, simulateLoop } from './process/closed-loop';
export type { ControllerOptions } from './process/controller';
export { type LinearProcessOptions, simulateProcess } from './process/linear-process';
export { type ControllerReading, readController } from './process/read-controller';
export { checkRecord } from './record/check-record';
export type { Fitness, FitnessCheck } from './record/fitness';
export type { LoggingFacts, LoopRecord, Note, Range, Response, Service } from './record/loop-record';
export { type ReadLoopOptions, readLoop } from './record/read-loop';
export { answerText } from './report/answer-text';
export { staticPictures } from './report/static-picture';
export type { Table, TableValue } from './report/table';
export { testCardHtml, testCardText } from './report/test-card';
export {
  type FrictionLaw,
  type FrictionPoint,
  measuredFriction,
  relayFriction,
  stepDownFriction,
  stribeckFriction,
} from './valve/friction-law';
export { type StemOptions, simulateStem } from './valve/stem';
export { type TwoParameterOptions, twoParameterValve, type ValveModel } from './valve/two-parameter';
export { version } from './version';
