import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { TREE } from './packed.js';

const AUDIT = fileURLToPath(new URL('audit.mjs', import.meta.url));

/** Runs the audit against a registry of its own that answers every question about weaknesses with this. */
async function audit(status: number, answer: unknown) {
  const server = createServer((request, response) => {
    request.resume();
    response.writeHead(request.method === 'POST' ? status : 404, { 'content-type': 'application/json' });
    response.end(JSON.stringify(request.method === 'POST' ? answer : {}));
  });
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  const env = { ...process.env, npm_config_registry: `http://127.0.0.1:${port}/`, npm_config_fetch_retries: '0' };
  const child = spawn(process.execPath, [AUDIT], { cwd: TREE, env, stdio: ['ignore', 'pipe', 'pipe'] });
  let text = '';
  for (const stream of [child.stdout, child.stderr]) {
    stream.on('data', (part) => {
      text += part;
    });
  }
  const [code] = await once(child, 'close');
  server.close();
  return { code, text };
}

describe('npm run audit', () => {
  it('ends with 0 if the registry knows of nothing', async () => {
    const { code, text } = await audit(200, {});
    expect(text).toMatch(/^0 known weaknesses in \d{3} packages\n$/);
    expect(code).toBe(0);
  });

  it('ends with 1 if it knows of something, which is listed', async () => {
    const advisory = {
      id: 1,
      url: 'https://example.org/1',
      title: 'invented',
      severity: 'high',
      vulnerable_versions: '*',
    };
    const { code, text } = await audit(200, { yaml: [advisory] });
    expect(text).toMatch(/^high: yaml .*: invented \(https:\/\/example\.org\/1\)$/m);
    expect(code).toBe(1);
  });

  it('ends with 2 if it gives no answer', async () => {
    const { code, text } = await audit(405, { error: 'no' });
    expect(text).toMatch(/^the registry could not be asked: \S.*\n$/);
    expect(code).toBe(2);
  });
});
