import { once } from 'node:events';
import { expect, it } from '@jest/globals';
import { identityOf, until } from './processes.mjs';
import { runForOutput, runTracked, startChild, stopChildren } from './supervisor.mjs';

const node = (script, options) => startChild('a test', process.execPath, ['-e', script], options);

it('keeps all that a program writes, and its exit status', async () => {
  const script = "process.stdout.write('x'.repeat(300000)); process.stderr.write('y'); process.exitCode = 3";
  const { status, output } = await runForOutput(process.execPath, ['-e', script]);
  expect(status).toBe(3);
  expect(output).toHaveLength(300_001);
});

it('counts a program that cannot be started, or that a signal ended, as failed', async () => {
  expect(await runTracked('/no/such/program', [])).toBe(1);
  expect(await runTracked(process.execPath, ['-e', "process.kill(process.pid, 'SIGKILL')"])).toBe(1);
});

it('ends children politely, and by force those that do not listen, together with what they started', async () => {
  const listens = node("process.on('SIGTERM', () => process.exit(5)); setInterval(() => {}, 1000); console.log('up')", {
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const deaf = node(
    `const { spawn } = require('node:child_process');
     process.on('SIGTERM', () => {});
     const child = spawn(process.execPath, ['-e', "process.on('SIGTERM', () => {}); setInterval(() => {}, 1000); console.log('up')"]);
     child.stdout.once('data', () => console.log(child.pid));`,
    { stdio: ['ignore', 'pipe', 'inherit'] },
  );
  const [[grandchild]] = await Promise.all([once(deaf.process.stdout, 'data'), once(listens.process.stdout, 'data')]);
  await stopChildren(500);
  expect(await listens.ended).toBe(5);
  expect(await deaf.ended).toBe('SIGKILL');
  expect(await until(() => identityOf(Number(String(grandchild))) === null, 5_000)).toBe(true);
});
