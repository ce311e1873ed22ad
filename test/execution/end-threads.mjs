// Loaded into every thread of a run by NODE_OPTIONS: now and then a thread ends in the middle of a block.
import { isMainThread, threadId } from 'node:worker_threads';

const ONE_IN = 60;

if (!isMainThread) {
  let state = Number(process.env.CHAOS_SEED ?? 0) * 1009 + threadId;
  const next = () => {
    // Numbers of Park and Miller, Communications of the ACM 31 (1988), multiplier 48271.
    state = (state * 48_271) % 2_147_483_647;
    return state;
  };
  next();
  const { add } = Atomics;
  // The thread entry counts every instance that it begins.
  Atomics.add = (...words) => (next() % ONE_IN === 0 ? process.exit(7) : add(...words));
}
