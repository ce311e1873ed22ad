import type { FailedInstance } from '../outcomes/block.js';

/** An instance that has no outcome because its simulation failed: a fault of ours, with its address. */
export class InstanceFault extends Error {
  override readonly name = 'InstanceFault';
  readonly candidate: string;
  /** 0 for the twin. */
  readonly instance: number;

  constructor(candidate: string, fault: { instance: number; message: string; stack: string }) {
    super(`${candidate}, ${fault.instance === 0 ? 'twin' : `instance ${fault.instance}`}: ${fault.message}`);
    this.candidate = candidate;
    this.instance = fault.instance;
    // The place in the simulation, not the place where the reply was read.
    this.stack = fault.stack;
  }

  /** The fault of the first of some instances that did not converge. */
  static ofFailed(candidate: string, [first]: readonly FailedInstance[]): InstanceFault {
    const { instance = 0, message = '' } = first ?? {};
    return new InstanceFault(candidate, {
      instance,
      message,
      stack: `NotConverged: ${message}\n    in ${candidate}, instance ${instance}`,
    });
  }
}
