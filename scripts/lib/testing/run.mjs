import { mkdirSync, rmSync } from 'node:fs';
import { cpus } from 'node:os';
import { chromium } from '../chromium.mjs';
import { ensureDependencies } from '../dependencies.mjs';
import { TEST, closeCluster, openCluster } from '../postgres/cluster.mjs';
import { say, tell } from '../say.mjs';
import { onInterruption, runForOutput } from '../supervisor.mjs';
import { countsOf, inWords, sum } from './results.mjs';
import { allSteps, reportsDir } from './steps.mjs';

/** npm test. Runs every chosen step whether or not another one failed, and ends with one line that sums them up. */
export async function test(args) {
  const interruption = onInterruption();
  let total = { passed: 0, failed: 1, skipped: 0 }; // what stands when not even a beginning can be made
  await tell(async () => {
    const steps = chosen(args);
    await ensureDependencies();
    rmSync(reportsDir, { recursive: true, force: true });
    mkdirSync(reportsDir, { recursive: true });
    const provided = await provide(new Set(steps.flatMap((step) => step.needs)));
    try {
      total = sum(await runAll(steps, provided, interruption));
    } finally {
      await provided.close();
    }
  });
  if (interruption.was()) total.failed += 1; // an interrupted run shows nothing
  if (total.failed > 0) process.exitCode = 1;
  console.log(inWords(total));
}

/**
 * The steps that the arguments name and those they need, all when they name none; what is no name of a step is a pattern for paths of test
 * files.
 */
function chosen(args) {
  const steps = allSteps(args.filter((arg) => !isStep(arg)));
  const named = args.filter(isStep);
  if (named.length === 0) return steps;
  const needed = steps.filter(({ name }) => named.includes(name)).flatMap(({ needs }) => needs);
  return steps.filter(({ name }) => named.includes(name) || needed.includes(name));
}

const isStep = (arg) => allSteps([]).some(({ name }) => name === arg);

/**
 * Makes what the steps need beforehand.
 * @param {Set<string>} needs
 * @returns what it adds to the environment, why anything is missing, and how to put it away again
 */
async function provide(needs) {
  const provided = { env: {}, missing: {}, close: async () => {} };
  const attempt = async (need, make) => {
    if (!needs.has(need)) return;
    try {
      await make();
    } catch (error) {
      provided.missing[need] = error.message;
    }
  };
  await attempt('database', async () => {
    provided.env.DATABASE_URL = await openCluster(TEST);
    provided.close = () => closeCluster(TEST);
  });
  await attempt('chromium', () => (provided.env.CHROMIUM = chromium()));
  return provided;
}

/**
 * As many steps at once as there are processors, four at most; those that want the machine for themselves come last, one by one. A step waits
 * for the steps it needs, which stand before it in the list.
 */
async function runAll(steps, provided, interruption) {
  const running = new Map();
  const run = async (step) => {
    await Promise.all(step.needs.map((need) => running.get(need)));
    return runStep(step, provided);
  };
  const begin = (step) => {
    const counts = run(step);
    running.set(step.name, counts);
    return counts;
  };
  const waiting = steps.filter((step) => !step.alone);
  const counts = [];
  const lane = async () => {
    for (let step = waiting.shift(); step && !interruption.was(); step = waiting.shift()) counts.push(await begin(step));
  };
  await Promise.all(cpus().slice(0, 4).map(lane));
  for (const step of steps.filter(({ alone }) => alone)) if (!interruption.was()) counts.push(await begin(step));
  return counts;
}

/** Runs one step and prints all it wrote at once, so that steps that run side by side do not mix their words. */
async function runStep(step, { env, missing }) {
  const obstacle = step.needs.map((need) => missing[need]).find(Boolean);
  const from = Date.now();
  const { status, output } = obstacle ? { status: 1, output: obstacle } : await runStepCommand(step, env);
  const counts = countsOf(step, status);
  if (counts.failed > 0) missing[step.name] = `not run, because the step "${step.name}" failed`;
  const verdict = counts.failed === 0 ? 'ok    ' : 'FAILED';
  if (output.trim() && (step.report || counts.failed > 0)) process.stdout.write(`\n${output.trimEnd()}\n\n`);
  say(`${verdict} ${step.name}: ${step.what}, ${inWords(counts)}, ${((Date.now() - from) / 1000).toFixed(1)} s`);
  return counts;
}

function runStepCommand({ command: [program, ...args] }, env) {
  return runForOutput(program, args, { env: { ...testEnvironment(), ...env } });
}

/** Without what a person's shell adds for other purposes, so that a run means the same everywhere. */
function testEnvironment() {
  const colour = process.stdout.isTTY ? { FORCE_COLOR: '1' } : { NO_COLOR: '1' };
  const env = { ...process.env, NODE_ENV: 'test', TZ: 'UTC' };
  for (const name of ['FORCE_COLOR', 'DATABASE_URL', 'PORT', 'HOST', 'NODE_OPTIONS', 'FOREVEIL_MODE', 'LOG_LEVEL', 'APP_ORIGIN'])
    delete env[name];
  return { ...env, ...colour };
}
