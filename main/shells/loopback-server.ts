import {
  createServer,
  STATUS_CODES,
  type IncomingMessage,
  type Server,
  type ServerResponse,
} from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Duplex } from 'node:stream';
import { WebSocketServer, type WebSocket } from 'ws';
import type { Events } from '../api.ts';
import {
  Line,
  limits,
  pack,
  secretPrefix,
  unpack,
  wireProtocol,
  type ToWindow,
} from '../link/index.ts';
import type { Session } from '../window/session-types.ts';
import { Admission } from './admission.ts';
import { eventNames } from './channels.ts';
import { securityHeaders, type StaticFiles } from './static-files.ts';

const host = '127.0.0.1';
const longestToken = 200;

/** Told to windows when the shell closes (RFC 6455 leaves 4000 to 4999 to applications). */
export const closedByShell = 4000;

export interface LoopbackOptions {
  readonly session: Session;
  readonly files: StaticFiles;
  readonly onFault: (where: string, error: unknown) => void;
  /** 0 for any free port. */
  readonly port?: number;
  readonly admission?: Admission;
  readonly messageBytes?: number;
}

export interface Loopback {
  readonly port: number;
  readonly origin: string;
  /** An address that opens one window, once. */
  readonly newAddress: () => string;
  /** Windows that are connected now. */
  readonly windows: () => number;
  /** Settles when the next window connects. */
  readonly nextWindow: () => Promise<void>;
  readonly close: () => Promise<void>;
}

/**
 * The same session behind a browser window: HTTP for the window's files, which hold nothing of a
 * study, and a WebSocket for the api. What does not come from our own page with the secret is answered
 * with 403 before any of it is read.
 */
export async function startLoopback(options: LoopbackOptions): Promise<Loopback> {
  const { session, onFault } = options;
  const admission = options.admission ?? new Admission();
  const messageBytes = options.messageBytes ?? limits.messageBytes;
  const server = createServer({ requestTimeout: 10_000, headersTimeout: 10_000 });
  await listen(server, options.port ?? 0);
  const { port } = server.address() as AddressInfo;
  const authority = `${host}:${port}`;
  const origin = `http://${authority}`;
  const headers = securityHeaders([`ws://${authority}`]);

  server.on('request', (request, response) => {
    answer(request, response).catch((error: unknown) => {
      onFault('loopback', error);
      if (!response.headersSent)
        send(response, 500, 'text/plain', 'This is a fault in Understory.');
      else response.destroy();
    });
  });

  const sockets = new WebSocketServer({
    noServer: true,
    clientTracking: true,
    maxPayload: messageBytes,
    perMessageDeflate: false,
    handleProtocols: () => wireProtocol,
  });
  server.on('upgrade', (request, socket, head) => {
    if (!mayConnect(request)) {
      refuse(socket);
      return;
    }
    sockets.handleUpgrade(request, socket, head, (opened) => {
      connect(opened, session, onFault);
      sockets.emit('connection', opened, request);
    });
  });

  const ends = eventNames.map((event) =>
    session.on(event, (detail: Events[typeof event]) => {
      for (const socket of sockets.clients) tell(socket, { say: 'event', event, detail });
    }),
  );

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    // A name that was made to point here (DNS rebinding) stands in Host.
    if (request.headers.host !== authority || isForeignLoad(request)) {
      send(response, 403, 'text/plain', 'Not allowed.');
      return;
    }
    if (request.method === 'POST' && request.url === '/session') {
      const secret = request.headers.origin === origin ? await exchange(request) : null;
      if (secret === null) send(response, 403, 'text/plain', 'Not allowed.');
      else send(response, 200, 'text/plain', secret);
      return;
    }
    if (request.method !== 'GET' && request.method !== 'HEAD') {
      send(response, 405, 'text/plain', 'Not allowed.');
      return;
    }
    const { status, contentType, body } = await options.files.answer(request.url ?? '/');
    send(response, status, contentType, request.method === 'HEAD' ? '' : body);
  }

  async function exchange(request: IncomingMessage): Promise<string | null> {
    let token = '';
    for await (const part of request) {
      token += (part as Buffer).toString('latin1');
      if (token.length > longestToken) return null;
    }
    return admission.exchange(token);
  }

  function mayConnect(request: IncomingMessage): boolean {
    const { headers: sent, url } = request;
    if (sent.host !== authority || sent.origin !== origin || url !== '/link') return false;
    const protocols = (sent['sec-websocket-protocol'] ?? '').split(',').map((part) => part.trim());
    const secret = protocols.find((protocol) => protocol.startsWith(secretPrefix));
    if (!protocols.includes(wireProtocol) || secret === undefined) return false;
    return admission.admits(secret.slice(secretPrefix.length));
  }

  function send(
    response: ServerResponse,
    status: number,
    contentType: string,
    body: string | Uint8Array,
  ): void {
    response.writeHead(status, { ...headers, 'Content-Type': contentType });
    response.end(body);
  }

  return {
    port,
    origin,
    newAddress: () => `${origin}/#${admission.mintToken()}`,
    windows: () => sockets.clients.size,
    nextWindow: () => new Promise((resolve) => sockets.once('connection', () => resolve())),
    close: async () => {
      for (const end of ends) end();
      for (const socket of sockets.clients) socket.close(closedByShell, 'closed');
      await new Promise<void>((resolve) => {
        server.close(() => resolve());
        // A browser that does not answer the closing handshake is not waited for.
        setTimeout(() => {
          for (const socket of sockets.clients) socket.terminate();
          server.closeAllConnections();
        }, 200).unref();
      });
    },
  };
}

function listen(server: Server, port: number): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, () => {
      server.removeListener('error', reject);
      resolve();
    });
  });
}

/**
 * A page of another origin that loads our files into itself. Opening the address (navigation) is
 * allowed from anywhere: without a token the page stays empty. Browsers set these headers themselves;
 * a page cannot.
 */
function isForeignLoad(request: IncomingMessage): boolean {
  const site = request.headers['sec-fetch-site'];
  return (
    (site === 'cross-site' || site === 'same-site') &&
    request.headers['sec-fetch-mode'] !== 'navigate'
  );
}

function refuse(socket: Duplex): void {
  socket.on('error', () => socket.destroy());
  socket.end(
    `HTTP/1.1 403 ${STATUS_CODES[403]}\r\nConnection: close\r\nContent-Length: 0\r\n\r\n`,
    () => socket.destroy(),
  );
}

function tell(socket: WebSocket, message: ToWindow): void {
  if (socket.readyState === socket.OPEN) socket.send(pack(message));
}

function connect(
  socket: WebSocket,
  session: Session,
  onFault: (where: string, error: unknown) => void,
): void {
  const line = new Line({
    handlers: session.handlers,
    onProgress: (id, progress) => tell(socket, { say: 'progress', id, progress }),
    onFault,
  });
  socket.on('close', () => line.hangUp());
  // Too large or malformed frames: ws closes the connection itself.
  socket.on('error', () => undefined);
  socket.on('message', (data, isBinary) => {
    const message = isBinary ? read(data as Buffer) : null;
    if (message === null) {
      socket.close(1003, 'not understood');
      return;
    }
    const { say, id, method, takes } = message;
    if (say === 'cancel') {
      line.cancel(id);
      return;
    }
    void line.call({ id, method, takes, authorised: true }).then((answer) => {
      tell(socket, { say: 'answer', id: id as number, answer });
    });
  });
}

interface Heard {
  readonly say: 'call' | 'cancel';
  readonly id: unknown;
  readonly method: unknown;
  readonly takes: unknown;
}

/** Takes a message apart; null where it is none of the two that a window may send. */
function read(bytes: Buffer): Heard | null {
  try {
    const value = unpack(bytes);
    if (typeof value !== 'object' || value === null || !('say' in value)) return null;
    const { say, id, method, takes } = value as Partial<Heard>;
    return say === 'call' || say === 'cancel' ? { say, id, method, takes } : null;
  } catch {
    return null;
  }
}
