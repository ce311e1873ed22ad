import { cpSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join, posix } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import ts from 'typescript';

const ROOT = fileURLToPath(new URL('../..', import.meta.url));
const WORKER = 'workers/block.ts';
const STANDS_IN: ReadonlyMap<string, string> = new Map([
  ['src/simulation/simulate-instance.ts', 'test/execution/fake-engine.ts'],
]);

/** A copy of the program, compiled for threads and processes, in which only the simulation is another. */
export interface FakeProgram {
  readonly workerFile: URL;
  /** Compiled counterpart of a source of the project. */
  readonly compiled: (source: string) => string;
  readonly remove: () => void;
}

/**
 * Compiles the thread entry and what it imports, with the fake engine in place of the simulation; types are checked
 * elsewhere. The copy lies within the project so that packages are found.
 *
 * @param further sources that are compiled too, with what they import
 */
export function compileWithFakeEngine(further: readonly string[] = []): FakeProgram {
  const home = join(ROOT, 'node_modules', '.cache');
  mkdirSync(home, { recursive: true });
  const directory = mkdtempSync(join(home, 'fake-engine-'));
  const compiled = (source: string) => join(directory, 'dist', source.replace(/\.ts$/, '.js'));
  cpSync(join(ROOT, 'package.json'), join(directory, 'package.json'));
  const sources = new Set([WORKER, ...further]);
  // A set yields what is added to it while it is gone through.
  for (const source of sources) {
    const text = readFileSync(join(ROOT, STANDS_IN.get(source) ?? source), 'utf8');
    for (const imported of importsOf(text, source)) sources.add(imported);
    mkdirSync(dirname(compiled(source)), { recursive: true });
    writeFileSync(compiled(source), javascriptOf(text));
  }
  return {
    workerFile: pathToFileURL(compiled(WORKER)),
    compiled,
    remove: () => rmSync(directory, { recursive: true, force: true }),
  };
}

function javascriptOf(typescript: string): string {
  const compilerOptions = {
    target: ts.ScriptTarget.ES2022,
    module: ts.ModuleKind.ES2022,
    verbatimModuleSyntax: true,
  };
  return ts.transpileModule(typescript, { compilerOptions }).outputText;
}

/** Sources of the project that a source imports, types included. */
function importsOf(text: string, source: string): string[] {
  return ts
    .preProcessFile(text)
    .importedFiles.map(({ fileName }) => fileName)
    .filter((name) => name.startsWith('.'))
    .map((name) => posix.join(posix.dirname(source), name).replace(/\.js$/, '.ts'));
}
