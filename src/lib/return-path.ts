/** Where to go after signing in: a path of this application, never another site's address. */
export function safeReturnPath(asked: string | null, origin: string = window.location.origin): string {
  // A browser reads '//host' and '/\host' as another site; a control character may hide such a start.
  // eslint-disable-next-line no-control-regex -- it is the control characters that are looked for
  if (asked === null || !/^\/(?![/\\])/.test(asked) || /[\u0000-\u001f\\]/.test(asked)) return '/';
  const url = new URL(asked, origin);
  if (url.origin !== origin || url.pathname === '/sign-in') return '/';
  // '/..//host' is a path of this origin until it is read once more.
  if (url.pathname.startsWith('//')) return '/';
  return `${url.pathname}${url.search}${url.hash}`;
}

/** The sign-in page's address that leads back to `path` afterwards. */
export function signInPath(path: string): string {
  return path === '/' ? '/sign-in' : `/sign-in?return=${encodeURIComponent(path)}`;
}
