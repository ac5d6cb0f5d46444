import { type NoticesConfig, readNoticesConfig } from '@strikeboard/notices/config';

let kept: NoticesConfig | undefined;

/** Settings of notices from this process's environment, read at the first call. @throws ConfigProblem */
export function noticesConfig(): NoticesConfig {
  kept ??= readNoticesConfig(process.env);
  return kept;
}
