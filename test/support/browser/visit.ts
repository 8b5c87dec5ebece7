import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { AxeBuilder } from '@axe-core/playwright';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { repoRoot } from '../../../server/src/config/config.js';

export const outputDir = join(repoRoot, 'test', 'output');

/** A headless Chromium: the one CHROMIUM names, else Debian's. */
export function launch(): Promise<Browser> {
  const quiet = ['--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync', '--disable-quic'];
  const contained = ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage']; // root in a container has no sandbox, GPU or large /dev/shm
  return chromium.launch({ executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium', headless: true, args: [...quiet, ...contained] });
}

export interface Look {
  readonly scheme: 'light' | 'dark';
  readonly width: number;
}

/** One person's browser window, which remembers everything it should never have to complain about. */
export interface Visit {
  readonly context: BrowserContext;
  readonly page: Page;
  /** errors on the console, uncaught errors, broken content security rules; answers of 4xx that a test provokes are not errors of the page */
  readonly complaints: readonly string[];
  /** requests that left the server's own origin */
  readonly outside: readonly string[];
}

export async function visit(browser: Browser, url: string, { scheme = 'light', width = 1440 }: Partial<Look> = {}): Promise<Visit> {
  const context = await browser.newContext({
    baseURL: url,
    viewport: { width, height: width < 600 ? 844 : 1000 },
    hasTouch: width < 600,
    colorScheme: scheme,
    reducedMotion: 'reduce', // else axe sees half-faded elements
    acceptDownloads: true,
  });
  context.setDefaultTimeout(20_000);
  const page = await context.newPage();
  const complaints: string[] = [];
  const outside: string[] = [];
  page.on('console', (message) => {
    const refusedRequest = /^Failed to load resource: the server responded with a status of 4\d\d/.test(message.text());
    if (message.type() === 'error' && !refusedRequest) complaints.push(message.text());
  });
  page.on('pageerror', (error) => complaints.push(String(error)));
  page.on('request', (request) => {
    if (!request.url().startsWith(url) && !/^(data|blob):/.test(request.url())) outside.push(request.url());
  });
  return { context, page, complaints, outside };
}

const AXE_TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'];

/** What axe finds wrong with the page, one line a fault; empty when it is clean. `target-size` is off unless asked for. */
export async function accessibilityFaults(page: Page): Promise<string[]> {
  const options = { rules: { 'target-size': { enabled: true } }, resultTypes: ['violations' as const] }; // else it describes all that is well
  const axe = new AxeBuilder({ page }).options(options).withTags(AXE_TAGS); // in this order: options() forgets earlier tags
  axe.setLegacyMode(true); // in one piece, which is quicker; what it cannot do, frames, our pages do not have
  const { violations } = await axe.analyze();
  return violations.flatMap(({ id, nodes }) =>
    nodes.map((node) => `${id}: ${node.target.join(' ')} ${node.html.slice(0, 160)} ${node.failureSummary?.replaceAll('\n', ' ') ?? ''}`),
  );
}

/** A picture of the window in test/output, after the fonts have come. */
export async function shoot(page: Page, name: string): Promise<void> {
  mkdirSync(outputDir, { recursive: true });
  await page.evaluate(() => document.fonts.ready.then(() => undefined));
  await page.screenshot({ path: join(outputDir, `${name}.png`) });
}
