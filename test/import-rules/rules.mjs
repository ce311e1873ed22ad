// What each room may import, for dependency-cruiser: `npm run rules`. The table is the one in DEVELOPERS.md.

/** Rooms from top to bottom. `values`: may be imported as they are; `types`: as types only. */
const ROOMS = {
  mathematics: {},
  study: { values: ['mathematics'] },
  bank: { values: ['mathematics'], types: ['study'] },
  duty: { types: ['study'] },
  sampling: { values: ['mathematics'], types: ['study', 'bank'] },
  measures: { types: ['bank', 'duty'] },
  simulation: { values: ['mathematics', 'study', 'bank', 'duty', 'sampling', 'measures'] },
  outcomes: { values: ['measures'] },
  statistics: { values: ['mathematics'] },
  questions: { values: ['study', 'measures', 'outcomes', 'statistics'] },
  execution: { values: ['outcomes'], types: ['study'] },
  output: { values: ['measures', 'outcomes'], types: ['study', 'bank', 'duty', 'questions'] },
};

/** Packages that only one place imports, so that everything else is spared their habits. */
const DOORS = {
  jstat: 'src/mathematics/inverse-cdf.ts',
  seedrandom: 'src/sampling/streams.ts',
  'fast-csv': 'src/output/csv.ts',
  piscina: 'src/execution/pool.ts|workers/block.ts',
  commander: 'src/commands/program.ts',
  yaml: 'src/study/yaml-(source|depth).ts',
  zod: 'src/study/[^/]+',
};

/** Where files, clocks and the machine may be touched. A hash is a pure function: the study's key needs one. */
const SHELL = '^(src/(execution|output|commands)/|src/cli\\.ts$|workers/)';
const PURE_BUILT_INS = '^(node:)?crypto$';

const TYPE_ONLY = { dependencyTypesNot: ['type-only'] };

function anyOf(rooms) {
  return `^src/(${rooms.join('|')})/`;
}

/** Two rules of a place: nothing but what it may import, and types only where that is all it may. */
function rulesOf(name, from, { values = [], types = [] }) {
  const within = { path: '^(src|workers)/' };
  const allowed = [...values, ...types].map((room) => `^src/${room}/`);
  const rules = [
    {
      name: `${name}-imports-what-it-may`,
      comment: `${name} may import ${[...values, ...types.map((room) => `${room} (types)`)].join(', ') || 'nothing'}`,
      severity: 'error',
      from: { path: from },
      to: { ...within, pathNot: [from, ...allowed] },
    },
  ];
  if (types.length > 0) {
    rules.push({
      name: `${name}-imports-types-only`,
      comment: `${name} may import only types of ${types.join(', ')}`,
      severity: 'error',
      from: { path: from },
      to: { path: anyOf(types), ...TYPE_ONLY },
    });
  }
  return rules;
}

function doorRule([name, door]) {
  return {
    name: `${name}-has-one-door`,
    comment: `${name} is imported in ${door} only`,
    severity: 'error',
    from: { path: '^(src|workers)/', pathNot: `^(${door})$` },
    to: { path: `^node_modules/(@types/)?${name}/` },
  };
}

export default {
  forbidden: [
    ...Object.entries(ROOMS).flatMap(([room, may]) => rulesOf(room, `^src/${room}/`, may)),
    ...rulesOf('workers', '^workers/', { values: ['simulation', 'outcomes'], types: ['study'] }),
    ...Object.entries(DOORS).map(doorRule),
    {
      name: 'rooms-are-known',
      comment: 'a new room needs a line in the table of test/import-rules/rules.mjs and of DEVELOPERS.md',
      severity: 'error',
      from: { path: '^(src|workers)/' },
      to: { path: '^src/[^/]+/', pathNot: anyOf([...Object.keys(ROOMS), 'commands']) },
    },
    {
      name: 'entries-are-not-imported',
      comment: 'the command, the library and the thread entry are where things begin',
      severity: 'error',
      from: { path: '^(src|workers)/' },
      to: { path: '^(src/[^/]+\\.ts$|workers/)' },
    },
    {
      name: 'the-core-is-pure',
      comment: 'no clock, file or machine outside execution, output, commands, the entries',
      severity: 'error',
      from: { path: '^src/', pathNot: SHELL },
      to: { dependencyTypes: ['core'], pathNot: PURE_BUILT_INS },
    },
    {
      name: 'no-circles',
      severity: 'error',
      from: { path: '^(src|workers)/' },
      to: { circular: true, viaOnly: TYPE_ONLY },
    },
    {
      name: 'imports-exist',
      severity: 'error',
      from: {},
      to: { couldNotResolve: true },
    },
    {
      name: 'packages-are-dependencies',
      comment: 'what src and workers import is installed with the package; types may come from @types',
      severity: 'error',
      from: { path: '^(src|workers)/' },
      to: { dependencyTypes: ['npm-dev', 'npm-no-pkg', 'npm-unknown'], ...TYPE_ONLY, pathNot: '^node_modules/@types/' },
    },
  ],
  options: {
    tsConfig: { fileName: 'tsconfig.json' },
    // Imports of types are gone after compilation; the table speaks of them too.
    tsPreCompilationDeps: true,
    doNotFollow: { path: 'node_modules' },
    enhancedResolveOptions: { exportsFields: ['exports'], conditionNames: ['import', 'node', 'default', 'types'] },
  },
};
