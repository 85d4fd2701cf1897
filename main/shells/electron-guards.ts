import type { App, IpcMainEvent, IpcMainInvokeEvent, Session, WebContents } from 'electron';
import { appHost, appOrigin, appScheme } from './channels.ts';
import { securityHeaders, type StaticFiles } from './static-files.ts';

/** Switches for Chromium, before it starts: nothing of its own may go out. */
export function quietChromium(app: Pick<App, 'commandLine'>): void {
  const { commandLine } = app;
  // No name resolves, whatever may ask for one.
  commandLine.appendSwitch('host-resolver-rules', 'MAP * ~NOTFOUND');
  commandLine.appendSwitch('disable-background-networking');
  commandLine.appendSwitch('disable-component-update');
  commandLine.appendSwitch('disable-domain-reliability');
  commandLine.appendSwitch('dns-prefetch-disable');
  commandLine.appendSwitch('no-pings');
  // A crash report would hold memory, and memory holds transcripts.
  commandLine.appendSwitch('disable-breakpad');
}

/** Whether an address is one of the window's own files. */
export function isOurs(address: string): boolean {
  try {
    const url = new URL(address);
    return url.protocol === `${appScheme}:` && url.host === appHost;
  } catch {
    return false;
  }
}

export interface SessionGuards {
  /** Lets the developer tools load themselves. */
  readonly development: boolean;
}

/** Everything that a session could let a page do or fetch is refused. */
export function guardSession(session: Session, { development }: SessionGuards): void {
  session.setPermissionRequestHandler((_contents, _permission, answer) => answer(false));
  session.setPermissionCheckHandler(() => false);
  session.setDevicePermissionHandler(() => false);
  // Chromium fetches dictionaries for its spell checker; even a request for one says that somebody
  // types in that language.
  session.setSpellCheckerEnabled(false);
  session.setSpellCheckerDictionaryDownloadURL(`${appOrigin}/no-dictionaries/`);
  session.webRequest.onBeforeRequest(({ url }, answer) => {
    const tools = development && url.startsWith('devtools://');
    answer({ cancel: !isOurs(url) && !tools });
  });
  // Files leave through the save dialog, by the main process.
  session.on('will-download', (event) => event.preventDefault());
}

/** A page stays where it is and opens nothing. */
export function guardContents(contents: WebContents): void {
  contents.on('will-navigate', (event) => event.preventDefault());
  contents.on('will-frame-navigate', (event) => event.preventDefault());
  contents.on('will-redirect', (event) => event.preventDefault());
  contents.on('will-attach-webview', (event) => event.preventDefault());
  // A title shows in task bars and screen shares: it never says more than the app's name.
  contents.on('page-title-updated', (event) => event.preventDefault());
  contents.setWindowOpenHandler(() => ({ action: 'deny' }));
  contents.setWebRTCIPHandlingPolicy('disable_non_proxied_udp');
}

/** Whether a message comes from the top frame of our own page in our own window. */
export function isOurFrame(
  event: Pick<IpcMainEvent | IpcMainInvokeEvent, 'sender' | 'senderFrame'>,
  contents: WebContents | null,
): boolean {
  const { sender, senderFrame } = event;
  if (contents === null || sender !== contents || senderFrame === null) return false;
  return senderFrame.parent === null && isOurs(senderFrame.url);
}

/** Serves the window's files from our own scheme, so that the headers apply. */
export function serveApp(session: Session, files: StaticFiles): void {
  const headers = securityHeaders();
  session.protocol.handle(appScheme, async ({ url, method }) => {
    if (!isOurs(url) || method !== 'GET') {
      return new Response('Not allowed.', { status: 403, headers });
    }
    const { status, contentType, body } = await files.answer(url.slice(appOrigin.length));
    return new Response(new Uint8Array(body), {
      status,
      headers: { ...headers, 'Content-Type': contentType },
    });
  });
}
