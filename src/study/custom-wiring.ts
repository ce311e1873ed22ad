import { z } from 'zod';
import { CONDUCTOR_RULES, conductorKeys } from './conductor.js';
import { moduleId } from './names.js';
import { section } from './section.js';

const NODE_RULE = 'a node name of at most 32 letters, digits, hyphens and underscores';
const nodeName = z.string(NODE_RULE).regex(/^[A-Za-z0-9][A-Za-z0-9_-]{0,31}$/, NODE_RULE);
const MODULE_RULE = 'a branch of a module with module, minus and plus alone';
const CONDUCTOR_RULE = 'a branch of a conductor with from, to and mOhm or length_m';

const branchKeys = {
  module: moduleId.meta({ description: 'Module of this branch; other branches are conductors.' }).optional(),
  minus: nodeName.meta({ description: 'Node at the negative post of the module.' }).optional(),
  plus: nodeName.meta({ description: 'Node at the positive post of the module.' }).optional(),
  from: nodeName.meta({ description: 'Node at one end of the conductor.' }).optional(),
  to: nodeName.meta({ description: 'Node at its other end.' }).optional(),
};

// One mapping, not a union: of two mappings that both fail no message could tell which was meant.
const BRANCH = CONDUCTOR_RULES.reduce(
  (schema, [rule, words]) => schema.refine((value) => isModuleBranch(value) || rule(value), words),
  section({ ...branchKeys, ...conductorKeys })
    .refine(
      (value) =>
        !isModuleBranch(value) ||
        (value.minus !== undefined &&
          value.plus !== undefined &&
          [...Object.keys(conductorKeys), 'from', 'to'].every((key) => isFree(value, key))),
      MODULE_RULE,
    )
    .refine(
      (value) =>
        isModuleBranch(value) ||
        (value.from !== undefined && value.to !== undefined && isFree(value, 'minus') && isFree(value, 'plus')),
      CONDUCTOR_RULE,
    ),
);

/** The section `network` of a candidate with `wiring: custom`: its nodes, and its modules and conductors between them. */
export const NETWORK = section({
  nodes: z
    .array(nodeName, 'a list of node names')
    .min(2, 'a list of at least 2 node names')
    .max(200, 'a list of at most 200 node names')
    .meta({ description: 'Names of all nodes; posts of modules and ends of conductors.' }),
  bus_minus: nodeName.meta({ description: 'Node at which charger and load have their minus.' }),
  bus_plus: nodeName.meta({ description: 'Node at which charger and load have their plus.' }),
  branches: z
    .array(BRANCH, 'a list of branches')
    .min(1, 'a list of at least one branch')
    .max(400, 'a list of at most 400 branches')
    .meta({ description: 'Every module once, and conductors by mOhm or by length.' }),
});

export type NetworkInput = z.infer<typeof NETWORK>;
export type BranchInput = NetworkInput['branches'][number];

/** Ends of a branch: at the negative and the positive post of a module, or of a conductor from end to end. */
export function endsOf(branch: BranchInput): readonly [string, string] {
  return isModuleBranch(branch) ? [branch.minus ?? '', branch.plus ?? ''] : [branch.from ?? '', branch.to ?? ''];
}

function isModuleBranch({ module }: { readonly module?: string | undefined }): boolean {
  return module !== undefined;
}

function isFree(branch: object, key: string): boolean {
  return (branch as Readonly<Record<string, unknown>>)[key] === undefined;
}
