// A process that runs one SPICE deck, sent to it as a message, in a general-purpose circuit simulator, and answers with
// its waveforms or its complaint. A process of its own: the simulator keeps up to 630 MB, keeps the waveforms of the last
// deck if the next is faulty, and may never come back from a fault.

import { Simulation } from 'eecircuit-engine';

const LOOK_FOR_FAULTS_MS = 200;

const simulation = new Simulation();
// It prints whatever the simulator says, which is not for the reader of this process.
console.log = console.warn = console.error = () => {};

function answer(message) {
  process.send(message, () => process.exit());
}

function complaint() {
  return simulation.getError().join('\n').trim();
}

process.once('message', async (deck) => {
  await simulation.start();
  simulation.setNetList(deck);
  const startedUs = process.cpuUsage();
  // After a fault that ends the simulator its promise stays open.
  setInterval(() => {
    if (complaint() !== '') answer({ complaint: complaint() });
  }, LOOK_FOR_FAULTS_MS);
  const result = await simulation.runSim();
  const { user, system } = process.cpuUsage(startedUs);
  if (complaint() !== '') return answer({ complaint: complaint() });
  const columns = result.data.map(({ name, values }) => ({ name, values: Float64Array.from(values) }));
  answer({ columns, cpuS: (user + system) / 1e6 });
});
