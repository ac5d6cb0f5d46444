import { existsSync } from 'node:fs';
import { StackError } from './bootstrap.mjs';
import { installDebianPackage } from './debian.ts';
import type { Say } from './progress.ts';

const DEBIAN_CHROMIUM = '/usr/bin/chromium';

/** Sees to it that the browser tests have Debian's browser, or the one CHROMIUM_PATH names. */
export async function ensureChromium(env: NodeJS.ProcessEnv, say: Say): Promise<void> {
  const own = env.CHROMIUM_PATH;
  if (own !== undefined && own !== '') {
    if (existsSync(own)) return;
    throw new StackError(`CHROMIUM_PATH names ${own}, and there is no such file; correct it or unset it.`);
  }
  if (existsSync(DEBIAN_CHROMIUM)) return;
  await installDebianPackage('chromium', 'for the browser tests', say);
  if (!existsSync(DEBIAN_CHROMIUM)) {
    throw new StackError(`Debian's package "chromium" is installed but ${DEBIAN_CHROMIUM} is not there.`);
  }
}
