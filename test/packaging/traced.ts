import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import { readFileSync } from 'node:fs';

/** Whether system calls can be watched on this machine. */
export const canTrace =
  process.platform === 'linux' &&
  spawnSync('strace', ['-f', '-o', '/dev/null', 'true']).status === 0;

/** Starts a program of Node's with all its processes and threads watched; `log` gets their calls. */
export function startTraced(
  log: string,
  words: readonly string[],
  options: { readonly cwd: string; readonly env: NodeJS.ProcessEnv },
): ChildProcess {
  const trace = ['-f', '-qq', '-s', '256', '-e', 'trace=network', '-o', log];
  return spawn('strace', [...trace, process.execPath, ...words], {
    ...options,
    // A group of its own: strace itself lets no signal end it, and the program gets ours.
    detached: true,
    stdio: ['pipe', 'pipe', 'pipe'],
  });
}

export interface NetworkUse {
  /** Calls that reach out over IPv4 or IPv6, as strace writes them. */
  readonly reached: readonly string[];
  /** Addresses that something may come in at ("127.0.0.1:41234"). */
  readonly listened: readonly string[];
  /** Calls seen at all: a watch that sees nothing proves nothing. */
  readonly calls: number;
}

/** What a log says about the network. */
export function networkUse(log: string): NetworkUse {
  const lines = readFileSync(log, 'utf8')
    .split('\n')
    .filter((line) => line.includes('('));
  const internet = lines.filter((line) => /\bAF_(?:INET6?|PACKET|NETLINK)\b/u.test(line));
  const listened = internet.flatMap((line) => {
    const bound = /\bbind\(\d+, \{sa_family=AF_INET6?, .*?htons\((\d+)\).*?"([^"]+)"/u.exec(line);
    return bound === null ? [] : [`${bound[2]}:${bound[1]}`];
  });
  const reached = internet.filter((line) =>
    /\b(?:connect|sendto|sendmsg|sendmmsg)\(\d+.*\{sa_family=AF_INET6?\b/u.test(line),
  );
  return { reached, listened, calls: lines.length };
}
