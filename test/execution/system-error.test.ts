import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { errorCode, isSystemError } from '../../src/execution/system-error.js';

function thrownBy(act: () => unknown): unknown {
  try {
    act();
  } catch (error) {
    return error;
  }
  return undefined;
}

describe('an error of the system', () => {
  it('is told from a fault of a program, even one that has a code', () => {
    const absent = thrownBy(() => readFileSync('/nowhere/at/all'));
    const misuse = thrownBy(() => Buffer.alloc(-1));
    expect([isSystemError(absent), errorCode(absent)]).toEqual([true, 'ENOENT']);
    expect(misuse).toMatchObject({ code: 'ERR_OUT_OF_RANGE' });
    expect([isSystemError(misuse), errorCode(misuse)]).toEqual([false, undefined]);
    expect(errorCode('ENOENT')).toBeUndefined();
  });
});
