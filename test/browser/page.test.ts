import { mkdir, mkdtemp, readFile, rm } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import chromium from '@sparticuz/chromium';
import { type Browser, type Page, chromium as playwright } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { PROGRAM_DIR, type RunningLaboratory, runLaboratory } from '../server/runningLaboratory.ts';

const PHOTO = join(PROGRAM_DIR, 'samples', 'photos', 'GI-12.jpg');

let browser: Browser;
let folder: string;
beforeAll(async () => {
  await mkdir(join(PROGRAM_DIR, '.tmp'), { recursive: true });
  // The browser unpacks itself into the temporary folder: a folder of our own, not one another browser left.
  folder = await mkdtemp(join(PROGRAM_DIR, '.tmp', 'browser-'));
  process.env.TMPDIR = folder;
  browser = await playwright.launch({
    executablePath: await chromium.executablePath(),
    args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage'],
  });
}, 120_000);
afterAll(async () => {
  await browser?.close();
  await rm(folder, { recursive: true, force: true });
});

let laboratory: RunningLaboratory;
let page: Page;
const complaints: string[] = [];
beforeEach(async () => {
  laboratory = await runLaboratory();
  page = await browser.newPage({ viewport: { width: 1440, height: 900 } });
  page.setDefaultTimeout(30_000);
  complaints.length = 0;
  page.on('pageerror', (error) => complaints.push(error.message));
  page.on('console', (message) => {
    if (message.type() === 'error') complaints.push(message.text());
  });
});
afterEach(async () => {
  await page.close();
  await laboratory.stop();
});

async function createTest(): Promise<void> {
  await page.goto(`${laboratory.address}/tests/new`);
  await page.getByRole('textbox', { name: /^Specimen/ }).fill('T-0417');
  await page.getByRole('textbox', { name: /^Outside diameter/ }).fill('12');
  await page.getByRole('textbox', { name: /^Largest torque/ }).fill('85');
  await page.getByRole('combobox', { name: 'Torque direction' }).selectOption('ccw');
  await page.getByRole('button', { name: 'Create the test' }).click();
  await page.getByRole('heading', { name: 'T-0417' }).waitFor();
}

async function addPhoto(): Promise<void> {
  await page.locator('input[type=file]').first().setInputFiles(PHOTO);
  await page.getByTestId('plane-angle').waitFor();
}

describe('the page in a real browser', () => {
  test('from an empty laboratory to a measured break with its failure mode', async () => {
    await createTest();
    // τ = 16 T/(π d³) = 250.5 MPa, computed in the page.
    expect(await page.getByTestId('stress-elastic').textContent()).toContain('250.5');
    await addPhoto();
    expect(await page.getByTestId('plane-angle').textContent()).toMatch(/4\d\.\d+° ± \d/);
    expect(await page.locator('.mark-trace').first().getAttribute('d')).toMatch(/^M/);
    expect(await page.locator('.headline-mode').textContent()).toContain('Normal stress');
    expect(await page.locator('.plane-figure svg').count()).toBe(1);
    expect(complaints).toEqual([]);
  });

  test('typing a torque answers at once, and a wrong one says what is expected', async () => {
    await createTest();
    await page.getByRole('textbox', { name: /^Largest torque/ }).fill('170');
    await expect.poll(() => page.getByTestId('stress-elastic').textContent()).toContain('501');
    await page.getByRole('textbox', { name: /^Outside diameter/ }).fill('-3');
    await expect.poll(() => page.locator('.field-message').first().textContent()).toMatch(/\S/);
  });

  test('a trace corrected by keyboard becomes a reading beside the automatic one', async () => {
    await createTest();
    await addPhoto();
    await page.getByRole('button', { name: 'Correct the trace by hand' }).click();
    const handle = page.locator('.handle-trace').first();
    await handle.waitFor();
    await handle.focus();
    for (let i = 0; i < 5; i++) await page.keyboard.press('Shift+ArrowRight');
    await page.locator('.correction-save button.primary').click();
    await expect.poll(() => page.locator('.readings tbody tr').count()).toBe(2);
    expect(complaints).toEqual([]);
  });

  test('a log is imported, its refused rows are listed and can be fetched', async () => {
    await page.goto(`${laboratory.address}/import`);
    const log = 'specimen_id,diameter_mm,torque_max_Nm\nL-1,10,40\nL-2,-3,40\nL-3,12,85\n';
    await page
      .locator('input[type=file]')
      .first()
      .setInputFiles({ name: 'log.csv', mimeType: 'text/csv', buffer: Buffer.from(log) });
    await page.getByRole('button', { name: 'Import', exact: true }).click();
    await page.locator('.import-result').waitFor();
    expect(await page.locator('.counts').textContent()).toMatch(/Refused\D*1/);
    expect(await page.locator('.refusals tbody').textContent()).toContain('-3');
    await page.goto(`${laboratory.address}/`);
    await expect.poll(() => page.locator('.test-table tbody tr').count()).toBe(2);
  });

  test.each([1440, 820])('no serious accessibility fault at %i px', async (width) => {
    await createTest();
    await addPhoto();
    await page.setViewportSize({ width, height: 1000 });
    const axe = await readFile(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
    await page.evaluate(axe);
    const faults = await page.evaluate(async () => {
      // biome-ignore lint/suspicious/noExplicitAny: axe puts itself into the window
      const { violations } = await (window as any).axe.run(document, { resultTypes: ['violations'] });
      return (violations as { id: string; impact: string; nodes: { html: string }[] }[])
        .filter((v) => v.impact === 'serious' || v.impact === 'critical')
        .map((v) => `${v.id}: ${v.nodes.map((n) => n.html.slice(0, 120)).join(' | ')}`);
    });
    expect(faults).toEqual([]);
    const overflow = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
    expect(overflow).toBeLessThanOrEqual(0);
  });
});
