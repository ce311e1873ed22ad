import { z } from 'zod';
import { amount, choice, count } from './amount.js';
import { CLASS_5_MM2, class5OhmPerM, copperOhmPerM, GAUGES, gaugeOhmPerM } from './copper.js';
import { exactlyOneOf, section } from './section.js';
import { siFromKey } from './units.js';

/** Temperature at which tables and standards state the resistance of conductors, degC. */
const STANDARD_DEGC = 20;
const DEFAULT_JOINT_MOHM = 0.05;
/** A lug at either end. */
const DEFAULT_JOINTS = 2;

/** Keys that tell the resistance of a piece of conductor, for sections that have others beside them. */
export const conductorKeys = {
  mOhm: amount({ atLeast: 0, atMost: 1e7 }, { description: 'Resistance without joints.' }).optional(),
  length_m: amount({ above: 0, atMost: 1000 }, { description: 'Length, with area_mm2 or awg.' }).optional(),
  area_mm2: amount({ above: 0, atMost: 10_000 }, { description: 'Cross-section.' }).optional(),
  awg: z
    .literal(GAUGES, `one of ${GAUGES.join(', ')}`)
    .meta({ description: 'American wire gauge, stranded copper; 2 % for the lay.' })
    .optional(),
  conductor: choice(['copper', 'class-5'], {
    description: 'copper: by resistivity (IEC 60028); class-5: the greatest resistance IEC 60228 allows.',
    default: 'copper',
  }).optional(),
  conductor_degC: amount(
    { atLeast: -50, atMost: 150 },
    { description: 'Temperature of the conductor.', default: STANDARD_DEGC },
  ).optional(),
  joints: count(
    { atLeast: 0, atMost: 20 },
    { description: 'Lugs and bolted joints in series with it.', default: DEFAULT_JOINTS },
  ).optional(),
  joint_mOhm: amount(
    { atLeast: 0, atMost: 1000 },
    { description: 'Resistance of each joint.', default: DEFAULT_JOINT_MOHM },
  ).optional(),
};

export type ConductorInput = z.infer<z.ZodObject<typeof conductorKeys>>;

/** What the keys must be to one another, as refinements for `refine`. */
export const CONDUCTOR_RULES: readonly [(value: ConductorInput) => boolean, string][] = [
  exactlyOneOf('mOhm', 'length_m'),
  [
    ({ length_m, area_mm2, awg, conductor, conductor_degC }) =>
      length_m !== undefined || [area_mm2, awg, conductor, conductor_degC].every((value) => value === undefined),
    'a mapping without area_mm2, awg, conductor and conductor_degC beside mOhm',
  ],
  [
    ({ length_m, area_mm2, awg }) => length_m === undefined || (area_mm2 === undefined) !== (awg === undefined),
    'a mapping with exactly one of area_mm2, awg beside length_m',
  ],
  [
    ({ conductor, area_mm2 }) => conductor !== 'class-5' || (area_mm2 !== undefined && CLASS_5_MM2.includes(area_mm2)),
    `a mapping with an area_mm2 among ${CLASS_5_MM2.join(', ')} beside conductor: class-5`,
  ],
];

/** A piece of conductor by ohms or by length and cross-section, with its joints. */
export const CONDUCTOR = CONDUCTOR_RULES.reduce(
  (schema, [rule, words]) => schema.refine(rule, words),
  section(conductorKeys),
);

/**
 * Resistance of a conductor with its joints, Ohm.
 *
 *   R = l r + n r_joint,   r the resistance per metre at the temperature of the conductor
 *
 * @param lengthShare share of the written length or resistance that is meant; the joints stay as they are
 */
export function conductorOhm(input: ConductorInput, lengthShare = 1): number {
  const joints = input.joints ?? DEFAULT_JOINTS;
  const jointOhm = siFromKey('mOhm', input.joint_mOhm ?? DEFAULT_JOINT_MOHM);
  return lengthShare * bareOhm(input) + joints * jointOhm;
}

function bareOhm({ mOhm, length_m, area_mm2, awg, conductor, conductor_degC }: ConductorInput): number {
  if (length_m === undefined) return siFromKey('mOhm', mOhm ?? 0);
  const degC = conductor_degC ?? STANDARD_DEGC;
  if (awg !== undefined) return length_m * gaugeOhmPerM(awg, degC);
  const areaMm2 = area_mm2 ?? 0;
  const perM = conductor === 'class-5' ? class5OhmPerM(areaMm2, degC) : copperOhmPerM(areaMm2, degC);
  if (perM === undefined) throw new RangeError(`class 5 must have a cross-section of ${areaMm2} mm2`);
  return length_m * perM;
}
