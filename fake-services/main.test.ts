import { spawn } from 'node:child_process';
import type { ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { ACCOUNT, PHONE, sdkFor, sendJson, SHOP, TOKEN } from '#fakes/lib/testKit';

const ROOT = fileURLToPath(new URL('..', import.meta.url));

function run(environment: Record<string, string>): ChildProcess {
  return spawn(process.execPath, ['--import', 'tsx', 'fake-services/main.ts'], {
    cwd: ROOT,
    env: { PATH: process.env.PATH, ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
}

async function firstLine(child: ChildProcess): Promise<string> {
  if (!child.stdout) throw new Error('no output to read');
  for await (const line of createInterface({ input: child.stdout })) return line;
  throw new Error('ended without a line');
}

describe('all three together', () => {
  it('print their addresses, share one clock and end on SIGTERM', { timeout: 20_000 }, async () => {
    const child = run({
      TWILIO_ACCOUNT_SID: ACCOUNT,
      TWILIO_AUTH_TOKEN: TOKEN,
      FAKE_START_AT: '2027-05-04T10:00:00Z',
    });
    const addresses = JSON.parse(await firstLine(child)) as Record<string, string>;
    expect(Object.keys(addresses)).toEqual(['sms', 'mail', 'smtp', 'clock']);
    await sendJson(addresses.clock ?? '', { advanceMs: 3_600_000 }, 'PUT');
    const sdk = sdkFor(addresses.sms ?? '');
    const message = await sdk.messages.create({ to: PHONE, from: SHOP, body: 'On time' });
    expect(message.dateCreated.toISOString()).toMatch(/^2027-05-04T11:0/);
    child.kill('SIGTERM');
    expect(await once(child, 'exit')).toEqual([0, null]);
  });

  it('say which variable is missing and end', { timeout: 20_000 }, async () => {
    const child = run({ TWILIO_ACCOUNT_SID: ACCOUNT });
    let said = '';
    child.stderr?.on('data', (chunk: Buffer) => (said += chunk.toString()));
    expect(await once(child, 'close')).toEqual([1, null]);
    expect(said).toContain('TWILIO_AUTH_TOKEN is missing');
  });
});
