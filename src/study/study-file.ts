import { z } from 'zod';
import { ACCEPTANCE } from './acceptance.js';
import { amount, choice, count } from './amount.js';
import { BANK, CANDIDATES } from './candidate.js';
import { DUTY } from './duty.js';
import { ENOUGH } from './enough.js';
import { OCV } from './ocv.js';
import { SAMPLING_PLANS } from './sampling-plan.js';
import { section } from './section.js';
import { SEED } from './seed.js';
import { STOCKS } from './stocks.js';

/** Version of the study format that this program reads. */
export const FORMAT = 1;

/** Defaults of the keys at the top of a study. */
export const DEFAULT_TOP = {
  seed: 1,
  instances: 512,
  block: 32,
  plan: 'independent',
  cycles: 180,
  confidence_percent: 95,
  drift_limit_percent: 5,
} as const;

const BLOCK_RULE = 'a power of 2 from 1 to 4096';

/** A study file: the schema from which types, messages and the published JSON Schema are made. */
export const STUDY_FILE = section({
  motleybank: z.literal(FORMAT, `${FORMAT}`).meta({ description: 'Version of the study format.' }),
  title: z
    .string('a text')
    .max(200, 'a text of at most 200 characters')
    .meta({ description: 'Heads the output.' })
    .optional(),
  seed: SEED.meta({ description: 'Whole number or text; 0 is a seed.', default: DEFAULT_TOP.seed }).optional(),
  instances: count(
    { atLeast: 1, atMost: 10_000_000 },
    { description: 'Sampled banks of every candidate.', default: DEFAULT_TOP.instances },
  ).optional(),
  block: z
    .number(BLOCK_RULE)
    .int(BLOCK_RULE)
    .gte(1, BLOCK_RULE)
    .lte(4096, BLOCK_RULE)
    .refine((value) => Number.isInteger(Math.log2(value)), BLOCK_RULE)
    .meta({ description: 'Instances in a block, a power of 2.', default: DEFAULT_TOP.block })
    .optional(),
  plan: choice(SAMPLING_PLANS, {
    description:
      'How the draws of a block are spread: each by itself, every range covered evenly, or ranges of several together. ' +
      'But for the first, instances are rounded up to whole blocks.',
    default: DEFAULT_TOP.plan,
  }).optional(),
  cycles: count(
    { atLeast: 1, atMost: 36_500 },
    { description: 'Cycles simulated for every instance.', default: DEFAULT_TOP.cycles },
  ).optional(),
  confidence_percent: amount(
    { atLeast: 50, atMost: 99.99 },
    { description: 'Two-sided confidence of every interval.', default: DEFAULT_TOP.confidence_percent },
  ).optional(),
  drift_limit_percent: amount(
    { above: 0, atMost: 100 },
    {
      description: 'Drift, of rated capacity, whose first passing is reported.',
      default: DEFAULT_TOP.drift_limit_percent,
    },
  ).optional(),
  ocv: OCV.meta({ description: 'Open-circuit tables by name.' }).optional(),
  stock: STOCKS.meta({ description: 'Where modules come from.' }),
  bank: BANK.meta({ description: 'Options of every candidate that does not say otherwise.' }).optional(),
  duty: DUTY.meta({ description: 'What the bank has to do.' }),
  candidates: CANDIDATES.meta({ description: 'Ways of wiring the bank, compared on the same sampled modules.' }),
  reference: z
    .string('the name of a candidate')
    .meta({ description: 'Candidate the others are compared with; default: the first.' })
    .optional(),
  acceptance: ACCEPTANCE.meta({ description: 'Lines that a candidate must meet.' }).optional(),
  enough: ENOUGH.meta({ description: 'When fewer banks than instances are enough; default: never.' }).optional(),
});

/** A study file as written, where every section may be missing. */
export const PARTIAL_STUDY_FILE = STUDY_FILE.partial();

export type StudyInput = z.infer<typeof PARTIAL_STUDY_FILE>;

/** @returns the published JSON Schema of study files (draft 2020-12), for editors and other programs */
export function studyJsonSchema(): Readonly<Record<string, unknown>> {
  const schema = z.toJSONSchema(STUDY_FILE, { io: 'input' });
  return { ...schema, title: 'motleybank study' };
}
