/**
 * Preloaded into every program the stack starts: when the process that started it is gone, even by
 * SIGKILL, the program is asked to end and, if it does not, is ended.
 */
import { isMainThread } from 'node:worker_threads';

if (isMainThread) {
  const parent = process.ppid;
  const timer = setInterval(() => {
    if (process.ppid === parent) return;
    clearInterval(timer);
    setTimeout(() => process.kill(process.pid, 'SIGKILL'), 5000).unref();
    process.kill(process.pid, 'SIGTERM');
  }, 300);
  timer.unref();
}
