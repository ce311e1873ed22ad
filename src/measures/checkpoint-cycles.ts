/**
 * Checkpoint cycles of a horizon: the first and last cycle and evenly spaced ones between, at most `most`.
 * Spacing is the smallest whole number that fits, so that a longer horizon only thins them.
 */
export function checkpointCycles(cycles: number, most = 31): readonly number[] {
  if (cycles <= most) return Array.from({ length: cycles }, (_, index) => index + 1);
  const spacing = Math.ceil(cycles / (most - 1));
  const checkpoints = [1];
  for (let cycle = spacing; cycle < cycles; cycle += spacing) if (cycle > 1) checkpoints.push(cycle);
  checkpoints.push(cycles);
  return checkpoints;
}
