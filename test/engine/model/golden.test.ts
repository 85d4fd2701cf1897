import { join } from 'node:path';
import type { Browser } from 'playwright-core';
import { build, type Rolldown } from 'vite';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { assemblyscript } from '../../../.config/assemblyscript.ts';
import { methodNumber } from '../../../engine/model/index.ts';
import { preparationMethod } from '../../../engine/text/index.ts';
import { launchChromium } from '../../browser/chromium.ts';
import { golden, type Golden } from './golden.ts';

// These are our own results: they say that bits have not changed, not that they are right. Where
// they change on purpose, raise `methodNumber` (for the words, `preparationMethod`), and take these
// from what the test prints.
const committed = {
  method: 2,
  preparation: 1,
  hashes: {
    functions: '7a356fbe82bfa9defb7da3b87dc4aea74129026efaf572a97877de95056c4754',
    'prepared words': 'be812f911d490ec93c0e9c449fb9ae0b37a1da58f7ce71f13ed8d0c719104f9a',
    corpus: 'f118f2109d4dc78c4bac2a65a9e3317ea8ea591d361d4230640e6e24b643f986',
    'from scratch': 'ccf29849671a0ed2334775683cbeabdd21e4d9c2c764ab0d510b36fc0fb936ea',
    're-fit with decisions': '1bd4277618dfa978e88e4960abad7709020432e2dd6b7e8ea0d19e9e782dc4dc',
    'mean field': '5779f60cd358837118d7fcd91596b0f678da877bb29a5bc29a3c6d1848f75b1d',
  } satisfies Golden,
};

/** The same module as a page runs it. */
async function bundled(): Promise<string> {
  const [{ output }] = (await build({
    configFile: false,
    logLevel: 'error',
    plugins: [assemblyscript()],
    build: {
      write: false,
      lib: { entry: join(import.meta.dirname, 'golden.ts'), formats: ['iife'], name: 'made' },
    },
  })) as Rolldown.RolldownOutput[];
  return output[0].code;
}

describe('the same bits', () => {
  let browser: Browser | undefined;
  let script: string;
  beforeAll(async () => {
    [browser, script] = await Promise.all([launchChromium(), bundled()]);
  });
  afterAll(() => browser?.close());

  /** In a page of its own, whose WebAssembly can be taken away before anything is loaded. */
  async function inPage(withWebAssembly: boolean): Promise<Golden> {
    const page = await browser!.newPage();
    if (!withWebAssembly) await page.addInitScript('delete globalThis.WebAssembly');
    await page.goto('about:blank');
    expect(await page.evaluate('typeof WebAssembly')).toBe(
      withWebAssembly ? 'object' : 'undefined',
    );
    await page.addScriptTag({ content: script });
    return page.evaluate('made.golden()');
  }

  it('belong to the methods whose hashes are committed', () => {
    expect(methodNumber).toBe(committed.method);
    expect(preparationMethod).toBe(committed.preparation);
  });

  it('come out in Node as committed', () => {
    expect(golden()).toEqual(committed.hashes);
  });

  it('come out in Node without WebAssembly', async () => {
    vi.stubGlobal('WebAssembly', undefined);
    vi.resetModules();
    const plain = await import('./golden.ts').finally(() => vi.unstubAllGlobals());
    const { defaultKernel } = await import('../../../engine/model/kernel/index.ts');
    const { plainKernel } = await import('../../../engine/model/kernel/plain.ts');
    expect(defaultKernel).toBe(plainKernel);
    expect(plain.golden()).toEqual(committed.hashes);
  });

  it('come out in a browser', async () => {
    const found = await inPage(true);
    expect(found).toEqual(golden());
    expect(found).toEqual(committed.hashes);
  });

  it('come out in a browser without WebAssembly', async () => {
    expect(await inPage(false)).toEqual(committed.hashes);
  });
});
