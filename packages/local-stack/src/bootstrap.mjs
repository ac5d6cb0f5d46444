/**
 * What the start needs before any package is installed: plain JavaScript, node: built-ins only.
 * Types are in bootstrap.d.mts.
 */
import { createHash } from 'node:crypto';
import { realpathSync } from 'node:fs';
import net from 'node:net';

export const DEFAULT_PORT = 4321;

/** A failure the reader can act on: its message is the whole story, so it is shown without a stack. */
export class StackError extends Error {
  name = 'StackError';
}

/** The port in `text`, or the default when it is unset. */
export function parsePort(text, name = 'PORT') {
  if (text === undefined || text === '') return DEFAULT_PORT;
  const port = Number(text);
  if (!/^\d+$/.test(text) || port < 1 || port > 65535) {
    throw new StackError(
      `${name} is "${text}"; it must be a whole number from 1 to 65535, for example ${name}=4321.`,
    );
  }
  return port;
}

export async function assertPortFree(port, command = 'start') {
  const code = await listenError({ port, host: '127.0.0.1' });
  if (code === undefined) return;
  if (code === 'EACCES') {
    throw new StackError(
      `Port ${port} may not be used by this account; choose one above 1023, for example: PORT=4321 npm ${run(command)}`,
    );
  }
  if (code !== 'EADDRINUSE') throw new StackError(`Port ${port} on 127.0.0.1 cannot be used (${code}).`);
  const other = port < 65535 ? port + 1 : port - 1;
  throw new StackError(
    `Port ${port} on 127.0.0.1 is already in use; stop the program that uses it, or choose another port: PORT=${other} npm ${run(command)}`,
  );
}

/**
 * A lock that the kernel gives back however its holder ends: a listening socket in Linux's abstract
 * namespace, named by the folder. It tells whoever asks what the holder said about itself.
 */
export async function holdLock(folder, kind, about) {
  const name = `\0strikeboard-${kind}-${createHash('sha256').update(realpathSync(folder)).digest('hex').slice(0, 32)}`;
  const server = net.createServer((socket) => {
    socket.on('error', () => {});
    socket.end(about());
  });
  server.unref();
  const code = await new Promise((resolve) => {
    server.once('error', (error) => resolve(error.code));
    server.listen(name, () => resolve(undefined));
  });
  if (code === undefined)
    return { held: true, release: () => new Promise((done) => server.close(() => done())) };
  if (code !== 'EADDRINUSE') throw new StackError(`The folder ${folder} could not be locked (${code}).`);
  return { held: false, holder: await askHolder(name) };
}

/** Calls `onGone` once when the process that started this one is no longer there. */
export function watchParent(onGone, everyMs = 300) {
  const parent = process.ppid;
  const timer = setInterval(() => {
    if (process.ppid === parent) return;
    clearInterval(timer);
    onGone();
  }, everyMs);
  timer.unref();
  return () => clearInterval(timer);
}

/** Ends a process group: SIGTERM, then SIGKILL for what is left. */
export async function endGroup(groupId, graceMs = 5000) {
  if (!signalGroup(groupId, 'SIGTERM')) return;
  const until = Date.now() + graceMs;
  while (Date.now() < until) {
    await new Promise((done) => setTimeout(done, 50));
    if (!signalGroup(groupId, 0)) return;
  }
  signalGroup(groupId, 'SIGKILL');
}

function signalGroup(groupId, signal) {
  try {
    process.kill(-groupId, signal);
    return true;
  } catch {
    return false;
  }
}

function run(command) {
  return command === 'dev' ? 'run dev' : command;
}

function listenError(address) {
  return new Promise((resolve) => {
    const probe = net.createServer();
    probe.once('error', (error) => resolve(error.code));
    probe.listen({ ...address, exclusive: true }, () => probe.close(() => resolve(undefined)));
  });
}

function askHolder(name) {
  return new Promise((resolve) => {
    let said = '';
    const socket = net.connect(name);
    socket.setTimeout(1000, () => socket.destroy());
    socket.on('data', (bytes) => {
      said += bytes;
    });
    socket.on('error', () => {});
    socket.on('close', () => resolve(said.trim()));
  });
}
