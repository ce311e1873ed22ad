// Preloaded into a process and each of its threads: whatever tries to reach another machine ends the process.
//
// Names the call in a line on stderr and kills the process: a status of its own could be caught and changed.

import dgram from 'node:dgram';
import dns from 'node:dns';
import { writeSync } from 'node:fs';
import { syncBuiltinESMExports } from 'node:module';
import net from 'node:net';
import process from 'node:process';

function forbid(owner, name) {
  owner[name] = () => {
    writeSync(2, `network: ${name}\n`);
    process.kill(process.pid, 'SIGKILL');
  };
}

forbid(net.Socket.prototype, 'connect');
forbid(net.Server.prototype, 'listen');
forbid(dgram, 'createSocket');
for (const name of ['lookup', 'resolve', 'resolve4', 'resolve6']) {
  forbid(dns, name);
  forbid(dns.promises, name);
}
syncBuiltinESMExports();
