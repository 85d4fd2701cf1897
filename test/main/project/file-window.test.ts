import * as fs from 'node:fs';
import { describe, expect, it } from 'vitest';
import { encodeHead, headFor } from '../../../main/project/frame.ts';
import { FileWindow } from '../../../main/project/file-window.ts';
import { nodeStorage } from '../../../main/project/index.ts';
import { newPath } from './study-folder.ts';

describe('looking for a frame', () => {
  it.each([-113, -112, -4, -3, -2, -1, 0, 1])(
    'finds it across the end of the buffer of 1 MiB (%i)',
    (from) => {
      const start = 1024 * 1024 + from;
      const body = Buffer.from('{"found":true}');
      const head = headFor('edit', 7, Buffer.alloc(16, 1), body, Buffer.alloc(32, 2));
      const at = newPath();
      fs.writeFileSync(at, Buffer.concat([Buffer.alloc(start), encodeHead(head), body]));
      const handle = nodeStorage.open(at, 'read');
      const window = new FileWindow(nodeStorage, handle, nodeStorage.stat(handle).size);
      expect(window.findHead(0)).toMatchObject({
        offset: start,
        head: { sequence: 7, kind: 'edit' },
      });
      expect(window.findHead(start + 1)).toBeNull();
      nodeStorage.close(handle);
    },
  );

  it('passes over magics that begin no head', () => {
    const noise = Buffer.alloc(50_000, Buffer.from([0xf7, 0x66, 0x72, 0x0a, 1]));
    const head = headFor('note', 3, Buffer.alloc(16), Buffer.alloc(0), Buffer.alloc(32));
    const at = newPath();
    fs.writeFileSync(at, Buffer.concat([noise, encodeHead(head)]));
    const handle = nodeStorage.open(at, 'read');
    const window = new FileWindow(nodeStorage, handle, nodeStorage.stat(handle).size);
    expect(window.findHead(0)).toMatchObject({ offset: 50_000, head: { sequence: 3 } });
    nodeStorage.close(handle);
  });

  it('passes over a head whose payload would end outside the file', () => {
    const head = headFor('edit', 1, Buffer.alloc(16), Buffer.alloc(50), Buffer.alloc(32));
    const at = newPath();
    fs.writeFileSync(at, encodeHead(head));
    const handle = nodeStorage.open(at, 'read');
    const window = new FileWindow(nodeStorage, handle, nodeStorage.stat(handle).size);
    expect(window.head(0)).toMatchObject({ sequence: 1, length: 50 });
    expect(window.findHead(0)).toBeNull();
    nodeStorage.close(handle);
  });
});
