/**
 * S and J as force and pressure: what friction they stand for on this actuator, what thrust is left beside it, and what
 * a given packing friction would mean in S and J.
 *
 * On a spring-and-diaphragm actuator the signal range moves the spring over its span force F. With Fs the friction at
 * rest and Fc the friction while sliding, S = (Fs + Fc) / F and J = (Fs - Fc) / F (Choudhury, Thornhill, Shah 2005,
 * Control Eng. Practice 13:641-658; the same words as on a slow stroke: S is the range on reversal, J the drop).
 */
import type { Unit } from 'mathjs';
import { cautions } from '../assessment/cautions';
import { refuseUnknownOptions, WrongUse } from '../errors';
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';

/** A quantity as a text with its unit, such as `52.5 kN/m`, or as a unit of mathjs. */
export type Quantity = string | Unit;

export interface FrictionOptions {
  /** Dead band plus stick band, % of OP span: a number, or an estimate whose ends are carried along. */
  readonly S: number | Estimate;
  /** Slip jump, %. Null where it is not resolved: the two frictions are then not told apart. */
  readonly J: number | Estimate | null;
  /** Spring rate and travel from 0 to 100 %: one way to the span force. */
  readonly springRate?: Quantity;
  readonly stroke?: Quantity;
  /** Actuator pressure at 0 and at 100 % and effective area: the other way. */
  readonly pressureRange?: { readonly low: Quantity; readonly high: Quantity };
  readonly area?: Quantity;
  /** Air supply at the actuator: with pressure range and area, the thrust beyond what the spring takes at 100 %. */
  readonly supplyPressure?: Quantity;
  /** That thrust, where it is known from the sizing of the actuator; goes before `supplyPressure`. */
  readonly spareThrust?: Quantity;
  /** Force of the flow on the plug that the thrust has to bear too. Default: none. */
  readonly flowForce?: Quantity;
  /** Packing friction while sliding and, where known, at rest (default: the same), to be told as S and J. */
  readonly packingFriction?: Quantity;
  readonly packingBreakaway?: Quantity;
  /** Units of the answer. Defaults `N` and `kPa`. */
  readonly forceUnit?: string;
  readonly pressureUnit?: string;
}

const OPTIONS = [
  'S',
  'J',
  'springRate',
  'stroke',
  'pressureRange',
  'area',
  'supplyPressure',
  'spareThrust',
  'flowForce',
  'packingFriction',
  'packingBreakaway',
  'forceUnit',
  'pressureUnit',
] as const;

export interface FrictionInForce {
  readonly schema: 'stickband/friction/1';
  /** Force and pressure from 0 to 100 % of the signal. */
  readonly spanForce: { readonly value: number; readonly unit: string };
  readonly spanPressure: { readonly value: number; readonly unit: string } | null;
  /** S as force: the friction band between the strokes up and down, Fs + Fc; and as pressure. */
  readonly band: { readonly force: Estimate; readonly pressure: Estimate | null };
  /** J as force: what friction drops by when the stem lets go, Fs - Fc. Null where J is. */
  readonly drop: { readonly force: Estimate; readonly pressure: Estimate | null } | null;
  /** Friction at rest, Fs, and while sliding, Fc. Null where J is. */
  readonly atRest: Estimate | null;
  readonly sliding: Estimate | null;
  /** Spare thrust, and what friction at rest (half the band where J is not resolved, at least) and flow leave of it. */
  readonly thrust: { readonly spare: number; readonly left: Estimate; readonly unit: string } | null;
  /** S and J that the stated packing friction alone would make. */
  readonly packing: { readonly S: number; readonly J: number; readonly unit: '% of OP span' } | null;
  readonly notes: readonly Note[];
  readonly cautions: readonly string[];
}

/** Span forces that differ by more than this are told (own choice). */
const spanAgreement = 0.1;
const percent = '% of OP span';

/**
 * @throws WrongUse for an unknown option, a unit that is not known or measures something else, S and J that are not
 *   0 <= J <= S, no way to the span force, or quantities that are not above 0
 */
export function frictionInForce(options: FrictionOptions): FrictionInForce {
  refuseUnknownOptions('frictionInForce', options, OPTIONS);
  const { forceUnit = 'N', pressureUnit = 'kPa' } = options;
  const S = asEstimate('S', options.S);
  const J = options.J === null ? null : asEstimate('J', options.J);
  if (J !== null && J.value > S.value) {
    throw new WrongUse(`J cannot be above S. Received S = ${S.value} % and J = ${J.value} %.`);
  }
  // A unit asked for in the answer must be one of force, or of pressure.
  const newton = 1 / inUnit(`1 ${forceUnit}`, 'N', 'forceUnit');
  const pascal = 1 / inUnit(`1 ${pressureUnit}`, 'Pa', 'pressureUnit');
  const notes: Note[] = [];
  const positive = (
    name: 'springRate' | 'stroke' | 'area' | 'spareThrust' | 'packingFriction',
    unit: string,
  ) => {
    const value = options[name];
    return value === undefined ? null : aboveZero(inUnit(value, unit, name), name);
  };
  const rate = positive('springRate', 'N/m');
  const stroke = positive('stroke', 'm');
  const area = positive('area', 'm^2');
  const range = options.pressureRange;
  const spanPressure =
    range === undefined
      ? null
      : aboveZero(
          inUnit(range.high, 'Pa', 'pressureRange.high') - inUnit(range.low, 'Pa', 'pressureRange.low'),
          'pressureRange',
        );
  const bySpring = rate === null || stroke === null ? null : rate * stroke;
  const byPressure = spanPressure === null || area === null ? null : spanPressure * area;
  const span = bySpring ?? byPressure;
  if (span === null) {
    throw new WrongUse(
      'frictionInForce needs a way to the force of the whole span: springRate with stroke, or pressureRange with area.',
    );
  }
  if (bySpring !== null && byPressure !== null && Math.abs(byPressure / bySpring - 1) > spanAgreement) {
    notes.push({
      code: 'spans-differ',
      text: `Spring rate times stroke is ${told(bySpring * newton)} ${forceUnit}, pressure range times area ${told(byPressure * newton)} ${forceUnit}. The spring's is used; check the nameplate data.`,
    });
  }
  const pressureOverSpan = spanPressure ?? (area === null ? null : span / area);
  const scaled = ({ value, low, high }: Estimate, per: number, unit: string): Estimate => ({
    value: (value / 100) * per,
    low: (low / 100) * per,
    high: (high / 100) * per,
    unit,
  });
  const both = (estimate: Estimate): { force: Estimate; pressure: Estimate | null } => ({
    force: scaled(estimate, span * newton, forceUnit),
    pressure: pressureOverSpan === null ? null : scaled(estimate, pressureOverSpan * pascal, pressureUnit),
  });
  // The ends of sum and difference: S and J vary apart, so their half widths add up in squares.
  const half = (sign: 1 | -1): Estimate | null => {
    if (J === null) return null;
    const value = (S.value + sign * J.value) / 2;
    const down = Math.hypot(S.value - S.low, sign > 0 ? J.value - J.low : J.high - J.value) / 2;
    const up = Math.hypot(S.high - S.value, sign > 0 ? J.high - J.value : J.value - J.low) / 2;
    return { value, low: Math.max(0, value - down), high: value + up, unit: percent };
  };
  const atRest = half(1);
  const sliding = half(-1);
  if (J === null) {
    notes.push({
      code: 'jump-not-resolved',
      text: 'J is not resolved, so friction at rest and while sliding are not told apart: at rest it is from half the band to all of it.',
    });
  }
  notes.push({
    code: 'whole-assembly',
    text: 'S and J as read from OP hold positioner, I/P and linkage too. The force is that of the stem only where the actuator is driven by OP without a positioner; with one it is an upper limit.',
  });

  const spare =
    positive('spareThrust', 'N') ??
    (options.supplyPressure !== undefined && range !== undefined && area !== null
      ? (inUnit(options.supplyPressure, 'Pa', 'supplyPressure') -
          inUnit(range.high, 'Pa', 'pressureRange.high')) *
        area
      : null);
  if (options.supplyPressure !== undefined && spare === null) {
    throw new WrongUse('supplyPressure gives a thrust only together with pressureRange and area.');
  }
  const flow = options.flowForce === undefined ? 0 : inUnit(options.flowForce, 'N', 'flowForce');
  let thrust: FrictionInForce['thrust'] = null;
  if (spare !== null) {
    const taken: Estimate = atRest ?? { value: S.value, low: S.low / 2, high: S.high, unit: percent };
    const left = (share: number): number => (spare - flow - (share / 100) * span) * newton;
    thrust = {
      spare: spare * newton,
      left: { value: left(taken.value), low: left(taken.high), high: left(taken.low), unit: forceUnit },
      unit: forceUnit,
    };
    if (thrust.left.low <= 0) {
      notes.push({
        code: 'no-thrust-left',
        text: 'Friction may take all of the spare thrust: the valve may not reach its end or its seat load.',
      });
    }
  }

  const packing = positive('packingFriction', 'N');
  const breakaway =
    options.packingBreakaway === undefined
      ? packing
      : inUnit(options.packingBreakaway, 'N', 'packingBreakaway');
  if (breakaway !== null && (packing === null || breakaway < packing)) {
    throw new WrongUse('packingBreakaway needs a packingFriction that is not above it.');
  }
  return {
    schema: 'stickband/friction/1',
    spanForce: { value: span * newton, unit: forceUnit },
    spanPressure: pressureOverSpan === null ? null : { value: pressureOverSpan * pascal, unit: pressureUnit },
    band: both(S),
    drop: J === null ? null : both(J),
    atRest: atRest && scaled(atRest, span * newton, forceUnit),
    sliding: sliding && scaled(sliding, span * newton, forceUnit),
    thrust,
    packing:
      packing === null || breakaway === null
        ? null
        : { S: (100 * (breakaway + packing)) / span, J: (100 * (breakaway - packing)) / span, unit: percent },
    notes,
    cautions,
  };
}

function asEstimate(name: string, given: number | Estimate): Estimate {
  const found = typeof given === 'number' ? { value: given, low: given, high: given, unit: percent } : given;
  if (found.unit !== percent) {
    throw new WrongUse(`${name} is in ${percent}. Received an estimate in "${found.unit}".`);
  }
  if (
    !(found.low >= 0 && found.value >= found.low && found.high >= found.value && Number.isFinite(found.high))
  ) {
    throw new WrongUse(
      `${name} must be 0 or more, its ends on either side of it. Received ${JSON.stringify(given)}.`,
    );
  }
  return found;
}

function aboveZero(value: number, name: string): number {
  if (!(value > 0 && Number.isFinite(value))) {
    throw new WrongUse(`The option "${name}" must be above 0. Received ${told(value)} in SI units.`);
  }
  return value;
}

/** Ways to write units that the trade uses and mathjs does not know: square inches, and gauge pressures. */
const written: readonly (readonly [RegExp, string])[] = [
  [/\b(in|ft)2\b/g, '$1^2'],
  [/²/g, '^2'],
  [/\b(psi|bar|mbar)g\b/g, '$1'],
  [/\b([kM]?Pa)g\b/g, '$1'],
];

function inUnit(quantity: Quantity, wanted: string, option: string): number {
  // Loaded where it is needed: mathjs takes most of a second.
  const { unit } = require('mathjs') as typeof import('mathjs');
  const text = typeof quantity === 'string' ? quantity : quantity.toString();
  let parsed: Unit;
  try {
    parsed = unit(written.reduce((sum, [from, to]) => sum.replace(from, to), text.trim()));
  } catch {
    throw new WrongUse(
      `The option "${option}" needs a number with a unit, such as "${example(wanted)}". Received "${text}".`,
    );
  }
  if (!parsed.equalBase(unit(wanted)) || parsed.value === null) {
    throw new WrongUse(
      `The option "${option}" must be in a unit of ${measured(wanted)}, such as "${example(wanted)}". Received "${text}".`,
    );
  }
  return parsed.toNumber(wanted);
}

const kinds: Readonly<Record<string, readonly [string, string]>> = {
  'N/m': ['spring rate', '52.5 kN/m'],
  m: ['length', '40 mm'],
  'm^2': ['area', '645 cm2'],
  Pa: ['pressure', '0.8 bar'],
  N: ['force', '900 N'],
};
const measured = (wanted: string): string => kinds[wanted]![0];
const example = (wanted: string): string => kinds[wanted]![1];

function told(value: number): string {
  return String(Number(value.toPrecision(3)));
}
