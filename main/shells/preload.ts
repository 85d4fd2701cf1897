import { contextBridge, ipcRenderer } from 'electron';
import { methods } from '../api.ts';
import { cancelChannel, channelOf, eventChannel, eventNames, progressChannel } from './channels.ts';

// Named functions only: the window gets no channel, no event object and nothing of Electron.
const calls = Object.fromEntries(
  methods.map((method) => [
    method,
    (id: unknown, takes: unknown): Promise<unknown> =>
      ipcRenderer.invoke(channelOf(method), id, takes),
  ]),
);

contextBridge.exposeInMainWorld('understory', {
  calls,
  cancel: (id: unknown): void => ipcRenderer.send(cancelChannel, id),
  onProgress: (listener: (id: unknown, progress: unknown) => void): void => {
    ipcRenderer.on(progressChannel, (_event, id: unknown, progress: unknown) =>
      listener(id, progress),
    );
  },
  onEvent: (listener: (event: string, detail: unknown) => void): void => {
    ipcRenderer.on(eventChannel, (_event, name: unknown, detail: unknown) => {
      const event = eventNames.find((known) => known === name);
      if (event !== undefined) listener(event, detail);
    });
  },
});
