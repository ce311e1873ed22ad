import { describe, expect, it } from 'vitest';
import { runDeck } from './run-deck.js';

/** A resistor charges a capacitor from 1 V; one time constant is 1 s. */
const CHARGING = `* charging
V1 a 0 1
R1 a b 1k
C1 b 0 1m ic=0
.option reltol=1e-6
.save v(b)
.tran 0.1 3 0 0.01 uic
.end
`;

describe('running a deck', () => {
  it('gives the waveforms by name, from the start to the end', async () => {
    const { timeS, vectors, cpuS } = await runDeck(CHARGING);
    expect([...vectors.keys()]).toEqual(['v(b)']);
    expect(timeS.at(-1)).toBeCloseTo(3, 9);
    expect(cpuS).toBeGreaterThan(0);
    // Closed form of the exponential charge; the simulator is told 1e-6.
    const worst = timeS.reduce(
      (most, t, i) => Math.max(most, Math.abs((vectors.get('v(b)')?.[i] ?? 0) - (1 - Math.exp(-t)))),
      0,
    );
    expect(worst).toBeLessThan(1e-5);
  });

  it('says what the simulator says of a deck it refuses', async () => {
    await expect(runDeck(CHARGING.replace('R1 a b 1k', 'R1 a b 1k\nD1 a b unheard'))).rejects.toThrow(/unheard/);
  });

  it('says it too where the simulator ends of itself', async () => {
    await expect(runDeck(CHARGING.replace('R1 a b 1k', 'B1 a b I = nothing(V(a)'))).rejects.toThrow(/syntax error/);
  });

  it('says it of a run that comes to no end', async () => {
    // From 1 s on a current that turns with the sign of the voltage it makes: no step is small enough.
    const stuck = CHARGING.replace('R1 a b 1k', 'R1 a b 1k\nB1 b 0 I = time < 1 ? 0 : (V(b) > 0.5 ? 1e9 : -1e9)');
    await expect(runDeck(stuck)).rejects.toThrow(/[Tt]imestep too small/);
  });

  it('refuses another analysis', async () => {
    await expect(runDeck(CHARGING.replace(/^\.tran.*$/m, '.dc V1 0 1 0.1'))).rejects.toThrow(/transient/);
  });

  it('ends a simulator that takes too long', async () => {
    await expect(runDeck(CHARGING, 0.05)).rejects.toThrow(/within 0.05 s/);
  });
});
