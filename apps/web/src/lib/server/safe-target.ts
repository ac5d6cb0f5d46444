/** Where to go after sign-in: a path of this site, never another's address. */
export function safeTarget(to: string | null, appOrigin: string): string {
  if (to === null || !/^\/(?![/\\])/.test(to) || !URL.canParse(to, appOrigin)) return '/';
  const url = new URL(to, appOrigin);
  return url.origin === appOrigin ? `${url.pathname}${url.search}` : '/';
}
