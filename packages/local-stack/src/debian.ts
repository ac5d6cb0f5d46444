import { spawn } from 'node:child_process';
import { StackError } from './bootstrap.mjs';
import type { Say } from './progress.ts';

/**
 * Installs one package from Debian's own archive. Needs root; anyone else is told the exact command.
 * @throws StackError when not root, or when apt-get fails
 */
export async function installDebianPackage(name: string, purpose: string, say: Say): Promise<void> {
  const commands = [
    ['apt-get', 'update'],
    ['apt-get', 'install', '-y', '--no-install-recommends', name],
  ];
  const asRoot = commands.map((words) => `sudo ${words.join(' ')}`).join(' && ');
  if (process.getuid?.() !== 0) {
    throw new StackError(
      `Debian's package "${name}" is needed ${purpose} and is missing. Install it, then run the command again:\n  ${asRoot}`,
    );
  }
  say(`Installing Debian's package "${name}", needed ${purpose} …`);
  for (const words of commands) {
    const code = await runLoudly(words);
    if (code !== 0) {
      throw new StackError(
        `"${words.join(' ')}" failed (exit code ${code}; the lines above say why). Put that right, or install the package by hand, and run the command again:\n  ${asRoot}`,
      );
    }
  }
}

function runLoudly(words: string[]): Promise<number> {
  const [program = '', ...args] = words;
  return new Promise((resolve) => {
    const child = spawn(program, ['-q', '-o', 'DPkg::Lock::Timeout=120', ...args], {
      stdio: ['ignore', 'inherit', 'inherit'],
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    });
    child.once('error', () => resolve(127));
    child.once('exit', (code) => resolve(code ?? 1));
  });
}
