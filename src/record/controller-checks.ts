/** Checks on how the loop was run: manual, set point, whether OP is the controller's answer to SP and PV. */
import { crossCorrelation } from '../signal/autocorrelation';
import { removeLine } from '../signal/trend';
import { all, type Checked, causeAndNumbers, percent, short, warns } from './checked';
import type { FitnessCheck } from './fitness';

/** Share of OP's movement that may go with SP. */
const mostBySp = 0.5;
const leastExplained = 0.5;
/** An OP that is explained less than this is no answer of a controller to this SP and PV. */
const notAController = 0.1;

export function controllerChecks(checked: Checked): FitnessCheck[] {
  return [manual(checked), spMovement(checked), opExplained(checked)];
}

function manual({ record: { logging } }: Checked): FitnessCheck {
  const passed = logging.manualShare < 1;
  return {
    code: 'manual',
    title: 'share of the export in manual',
    value: logging.modeLogged ? logging.manualShare : null,
    unit: '',
    limit: 'less than all of it',
    source: 'own choice: manual stretches are cut out; with nothing left there is no control to judge',
    passed,
    forbids: passed ? [] : all,
    text: !logging.modeLogged
      ? 'The controller mode was not logged; the loop is taken to have been in automatic.'
      : passed
        ? `${percent(logging.manualShare)} of the export is in manual and was cut out.`
        : 'The controller is in manual throughout: the loop was open.',
  };
}

function spMovement({ record, period }: Checked): FitnessCheck {
  const value = record.sp === null ? null : shareBySp(record.op, record.sp, period, record.samplePeriod);
  const passed = value === null || value <= mostBySp;
  return {
    code: 'sp-movement',
    title: "share of OP's movement that goes with SP",
    value,
    unit: '',
    limit: `at most ${percent(mostBySp)}`,
    source:
      'own choice: beyond it, SP moves the loop more than anything in it; a warning only, SP is used as an input',
    passed,
    forbids: warns,
    text:
      value === null
        ? 'SP was not logged.'
        : value === 0
          ? 'SP does not move.'
          : `${percent(value)} of OP's movement goes with SP${passed ? '' : ': look at what moves SP, such as the master of a cascade'}.`,
  };
}

/** Highest squared correlation of OP with SP, with OP at most a quarter of a cycle later. */
function shareBySp(op: Float64Array, sp: Float64Array, period: number | null, samplePeriod: number): number {
  if (op.length < 10 || sp.every((value) => value === sp[0])) return 0;
  const quarter = period === null ? 5 : Math.ceil(period / samplePeriod / 4);
  const latest = Math.max(1, Math.min(quarter, op.length - 2));
  const correlation = crossCorrelation(removeLine(sp), removeLine(op), latest);
  return correlation.subarray(latest - 1).reduce((best, r) => Math.max(best, r * r), 0);
}

function opExplained({ record, controller }: Checked): FitnessCheck {
  const value = controller?.explains ?? null;
  const passed = value === null || value >= leastExplained;
  const noController = value !== null && value < notAController && record.sp !== null;
  const reasons =
    'another column may have been taken for one of them, OP may follow a feedforward, or the record was altered';
  return {
    code: 'op-explained',
    title: "share of OP's moves that the controller read from SP and PV reproduces",
    value,
    unit: '',
    limit: `at least ${percent(leastExplained)}; below ${percent(notAController)} no cause and no numbers`,
    source:
      'own choice: a log slower than the controller and noise between stamps leave more than half in trials',
    passed,
    forbids: passed ? [] : noController ? causeAndNumbers : warns,
    text:
      controller === null || value === null
        ? 'The controller could not be read from SP, PV and OP.'
        : `A ${controller.form} controller (gain ${short(controller.gain)}) reproduces ${percent(value)} of OP's moves${passed ? '' : `: ${reasons}`}.`,
  };
}
