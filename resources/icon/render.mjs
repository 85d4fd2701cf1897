// Draws icon.svg in the sizes that systems want, and puts them together: icon.png (Linux), icon.ico
// (Windows), icon.icns (macOS). Run it after changing the drawing: node resources/icon/render.mjs
// CHROMIUM, with the path of a Chromium. Both containers hold PNG files as they are.
import { readFileSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { chromium } from 'playwright-core';

const folder = dirname(fileURLToPath(import.meta.url));
const svg = readFileSync(join(folder, 'icon.svg'), 'utf8');
const sizes = [16, 24, 32, 48, 64, 128, 256, 512, 1024];

/** @param {string} executablePath @param {Record<string, string>} env */
async function drawn(executablePath, env) {
  // A container's root has no sandbox to go into; only our own drawing is opened.
  const args = process.getuid?.() === 0 ? ['--no-sandbox'] : [];
  const browser = await chromium.launch({ executablePath, env, args });
  const page = await browser.newPage();
  /** @type {Map<number, Buffer>} */
  const images = new Map();
  for (const size of sizes) {
    await page.setViewportSize({ width: size, height: size });
    const sized = svg
      .replace('width="1024" height="1024"', `width="${size}" height="${size}"`)
      .replace(/^<\?xml[^>]*\?>/u, '');
    await page.setContent(
      `<style>*{margin:0}svg{display:block}body{background:transparent}</style>${sized}`,
    );
    images.set(size, await page.screenshot({ omitBackground: true }));
  }
  await browser.close();
  return images;
}

/** ICONDIR with one entry an image (Microsoft, "Icons", 1995; PNG entries since Windows Vista). */
function ico(images) {
  const head = Buffer.alloc(6 + 16 * images.length);
  head.writeUInt16LE(1, 2);
  head.writeUInt16LE(images.length, 4);
  let at = head.length;
  images.forEach(([size, png], n) => {
    const entry = 6 + 16 * n;
    // A side of 256 is written as 0.
    head.writeUInt8(size % 256, entry);
    head.writeUInt8(size % 256, entry + 1);
    head.writeUInt16LE(1, entry + 4);
    head.writeUInt16LE(32, entry + 6);
    head.writeUInt32LE(png.length, entry + 8);
    head.writeUInt32LE(at, entry + 12);
    at += png.length;
  });
  return Buffer.concat([head, ...images.map(([, png]) => png)]);
}

/** 'icns' with one block an image: type, length with its head, PNG. Types as Apple's iconutil writes. */
function icns(blocks) {
  const parts = blocks.map(([type, png]) => {
    const head = Buffer.alloc(8);
    head.write(type, 'latin1');
    head.writeUInt32BE(png.length + 8, 4);
    return Buffer.concat([head, png]);
  });
  const head = Buffer.alloc(8);
  head.write('icns', 'latin1');
  head.writeUInt32BE(8 + parts.reduce((sum, part) => sum + part.length, 0), 4);
  return Buffer.concat([head, ...parts]);
}

const [executablePath] = process.argv.slice(2);
if (executablePath === undefined) throw new Error('render: the path of a Chromium must be given');
const images = await drawn(executablePath, { ...process.env });
const image = (size) => images.get(size);
writeFileSync(join(folder, 'icon.png'), image(512));
writeFileSync(
  join(folder, 'icon.ico'),
  ico([16, 24, 32, 48, 64, 128, 256].map((size) => [size, image(size)])),
);
writeFileSync(
  join(folder, 'icon.icns'),
  icns([
    ['ic11', image(32)],
    ['ic12', image(64)],
    ['ic07', image(128)],
    ['ic13', image(256)],
    ['ic08', image(256)],
    ['ic14', image(512)],
    ['ic09', image(512)],
    ['ic10', image(1024)],
  ]),
);
