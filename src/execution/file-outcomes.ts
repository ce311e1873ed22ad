import { type FileHandle, open, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { blockCount, blockInstances, outcomeLayout, TWIN_BLOCK } from '../outcomes/block.js';
import { decodeBlock } from '../outcomes/block-csv.js';
import { ColumnValues } from '../outcomes/column-values.js';
import { type OutcomeColumn, type OutcomeRow, outcomeColumns } from '../outcomes/columns.js';
import { OutcomeFault } from '../outcomes/outcome-fault.js';
import { columnIndex, type OutcomeStore } from '../outcomes/outcome-store.js';
import type { Study } from '../study/study.js';
import { UNFINISHED } from './durable-file.js';
import type { CandidateFailure } from './failed-instances.js';
import { FolderLost } from './folder-lost.js';
import { blockFile, RUN_FILE, type RunFolder } from './run-folder.js';

const BYTES = Float64Array.BYTES_PER_ELEMENT;
/** Values held while rows are turned into columns: 8 MiB. */
const BATCH_VALUES = 1 << 20;

interface FileOutcomesOptions {
  /** Instances that have no row; every value of theirs is absent. */
  readonly failed?: readonly CandidateFailure[];
  /** Values held while rows are turned into columns; no fewer than those of a block. */
  readonly batchValues?: number;
}

/**
 * The outcomes in a run folder. Blocks hold rows and summaries want columns; so the blocks of a candidate are read and
 * checked once, when its first column is asked for, and laid down by column in a temporary file. From then on a column
 * is one read, and memory holds one column (8 bytes per instance) however many there are.
 */
export class FileOutcomes implements OutcomeStore {
  readonly #folder: RunFolder;
  readonly #sizing: { readonly instances: number; readonly blockSize: number };
  readonly #columns: ReadonlyMap<string, readonly OutcomeColumn[]>;
  readonly #byColumn = new Map<string, Promise<FileHandle>>();
  readonly #batchValues: number;
  readonly #failed: readonly CandidateFailure[];
  readonly instances: number;

  /** @param instances those to be read: all of the study, or as many as every candidate has */
  constructor(
    folder: RunFolder,
    study: Study,
    instances: number,
    { failed = [], batchValues = BATCH_VALUES }: FileOutcomesOptions = {},
  ) {
    this.#failed = failed;
    this.#batchValues = batchValues;
    this.#folder = folder;
    this.#sizing = { instances, blockSize: study.blockSize };
    this.#columns = new Map(
      study.candidates.map((candidate) => [candidate.key, outcomeColumns(outcomeLayout(study, candidate))]),
    );
    this.instances = instances;
  }

  columns(candidate: string): readonly OutcomeColumn[] {
    const columns = this.#columns.get(candidate);
    if (columns === undefined) throw new RangeError(`no candidate "${candidate}" in these outcomes`);
    return columns;
  }

  async column(candidate: string, name: string): Promise<ColumnValues> {
    const index = columnIndex(this.columns(candidate), name);
    let file = this.#byColumn.get(candidate);
    if (file === undefined) {
      file = this.#layDown(candidate);
      this.#byColumn.set(candidate, file);
    }
    const values = new Float64Array(this.instances);
    await readWhole(await file, values, index * this.instances * BYTES);
    return new ColumnValues(values);
  }

  async twin(candidate: string): Promise<OutcomeRow> {
    const [row] = await this.#rows(candidate, TWIN_BLOCK);
    if (row === undefined) throw new OutcomeFault(`${blockFile({ candidate, block: TWIN_BLOCK })} is empty`);
    return row;
  }

  /** Removes the temporary files; the outcomes stay. */
  async close(): Promise<void> {
    for (const [candidate, file] of this.#byColumn) {
      await file.then((handle) => handle.close()).catch(() => undefined);
      await rm(this.#temporary(candidate), { force: true });
    }
    this.#byColumn.clear();
  }

  async #layDown(candidate: string): Promise<FileHandle> {
    const file = await open(this.#temporary(candidate), 'w+');
    try {
      await this.#layDownInto(file, candidate);
      return file;
    } catch (error) {
      await file.close();
      throw error;
    }
  }

  async #layDownInto(file: FileHandle, candidate: string): Promise<void> {
    const width = this.columns(candidate).length;
    const height = Math.max(this.#sizing.blockSize, Math.floor(this.#batchValues / width));
    const batch = new Float64Array(width * height);
    let from = 0;
    let rows = 0;
    const flush = async () => {
      for (let column = 0; column < width; column++) {
        const values = batch.subarray(column * height, column * height + rows);
        await file.write(bytesOf(values), 0, values.byteLength, (column * this.instances + from) * BYTES);
      }
      from += rows;
      rows = 0;
    };
    for (let block = 1; block <= blockCount(this.#sizing); block++) {
      const { first, last } = blockInstances(block, this.#sizing);
      const decoded = new Map((await this.#rows(candidate, block)).map(({ instance, values }) => [instance, values]));
      if (rows + last - first + 1 > height) await flush();
      for (let instance = first; instance <= last; instance++) {
        const values = decoded.get(instance);
        for (let column = 0; column < width; column++) batch[column * height + rows] = values?.[column] ?? Number.NaN;
        rows++;
      }
    }
    await flush();
  }

  async #rows(candidate: string, block: number): Promise<OutcomeRow[]> {
    const name = blockFile({ candidate, block });
    const csv = await this.#folder.read(name);
    if (csv === undefined) throw new FolderLost(`${join(this.#folder.path, name)} was removed while the run went on`);
    try {
      const failed = this.#failed.filter((failure) => failure.candidate === candidate);
      return decodeBlock(this.columns(candidate), blockInstances(block, this.#sizing), csv, failed);
    } catch (error) {
      if (error instanceof OutcomeFault) throw new OutcomeFault(`${name}: ${error.message}`);
      throw error;
    }
  }

  #temporary(candidate: string): string {
    return join(this.#folder.path, RUN_FILE.outcomes, candidate, `columns${UNFINISHED}`);
  }
}

async function readWhole(file: FileHandle, into: Float64Array, position: number): Promise<void> {
  const bytes = bytesOf(into);
  let done = 0;
  while (done < bytes.byteLength) {
    const { bytesRead } = await file.read(bytes, done, bytes.byteLength - done, position + done);
    if (bytesRead === 0) throw new OutcomeFault('the temporary file of columns is too short');
    done += bytesRead;
  }
}

function bytesOf(values: Float64Array): Uint8Array {
  return new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
}
