import type { BlockTask } from '../outcomes/block.js';

/** A block whose thread ended each time it was tried. */
export class LostBlock extends Error {
  override readonly name = 'LostBlock';
  readonly task: BlockTask;

  constructor(task: BlockTask, reason: string) {
    super(`${blockName(task)}: its thread ended each time: ${reason}`);
    this.task = task;
  }
}

/** Address of a block for people. */
export function blockName({ candidate, block }: BlockTask): string {
  return block === 0 ? `${candidate}, twin` : `${candidate}, block ${block}`;
}
