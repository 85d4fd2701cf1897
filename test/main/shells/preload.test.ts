import { describe, expect, it, vi } from 'vitest';
import { methods } from '../../../main/api.ts';
import type { Bridge } from '../../../renderer/link.ts';

const fake = vi.hoisted(() => ({
  exposed: {} as Record<string, unknown>,
  invoked: [] as unknown[][],
  sent: [] as unknown[][],
  listeners: new Map<string, (event: unknown, ...words: unknown[]) => void>(),
}));

vi.mock('electron', () => ({
  contextBridge: {
    exposeInMainWorld: (name: string, value: unknown) => void (fake.exposed[name] = value),
  },
  ipcRenderer: {
    invoke: async (...call: unknown[]) => void fake.invoked.push(call),
    send: (...call: unknown[]) => void fake.sent.push(call),
    on: (channel: string, listener: (event: unknown, ...words: unknown[]) => void) =>
      void fake.listeners.set(channel, listener),
  },
}));
await import('../../../main/shells/preload.ts');
const bridge = fake.exposed['understory'] as Bridge;

describe('the preload', () => {
  it('gives the window one named function for each method, and nothing to choose a channel with', () => {
    expect(Object.keys(fake.exposed)).toEqual(['understory']);
    expect(Object.keys(bridge).sort()).toEqual(['calls', 'cancel', 'onEvent', 'onProgress']);
    expect(Object.keys(bridge.calls)).toEqual([...methods]);
  });

  it('sends each call on the channel of its method', async () => {
    await bridge.calls.nameTheme(7, { theme: 'a', name: 'b' });
    expect(fake.invoked).toEqual([['understory/call/nameTheme', 7, { theme: 'a', name: 'b' }]]);
    bridge.cancel(7);
    expect(fake.sent).toEqual([['understory/cancel', 7]]);
  });

  it('passes on progress and known events, without Electron’s own event', () => {
    const heard: unknown[][] = [];
    bridge.onProgress((...words) => heard.push(words));
    bridge.onEvent((...words) => heard.push(words));
    fake.listeners.get('understory/progress')?.({ sender: 'secret' }, 7, { fraction: 0.5 });
    fake.listeners.get('understory/event')?.({ sender: 'secret' }, 'closed', null);
    fake.listeners.get('understory/event')?.({ sender: 'secret' }, 'another', null);
    expect(heard).toEqual([
      [7, { fraction: 0.5 }],
      ['closed', null],
    ]);
  });
});
