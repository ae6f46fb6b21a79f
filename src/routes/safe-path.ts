/** Where to go after signing in: only to paths of this very page, never to another site. */
export function safePath(to: string | null): string {
  if (!to?.startsWith('/') || to.startsWith('//') || to.includes('\\')) return '/';
  const url = new URL(to, 'http://own.invalid');
  return url.host === 'own.invalid' ? `${url.pathname}${url.search}` : '/';
}
