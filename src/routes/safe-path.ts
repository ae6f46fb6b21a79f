/** Where to go after signing in: only to paths of this very page, never to another site. */
export function safePath(to: string | null): string {
  if (!to?.startsWith('/') || to.startsWith('//') || to.includes('\\')) return '/';
  // Browsers drop line breaks and tabs from addresses: what is left may lead elsewhere, or be no address at all.
  const url = URL.parse(to, 'http://own.invalid');
  return url?.host === 'own.invalid' ? `${url.pathname}${url.search}` : '/';
}
