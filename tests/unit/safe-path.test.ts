import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { safePath } from '../../src/routes/safe-path';

describe('where signing in leads', () => {
  it.each(['/', '/team', '/arms/a1/move', '/arms/a1/runs?from=2'])('keeps %s, a path of this page', (to) => {
    expect(safePath(to)).toBe(to);
  });

  it('leads to the arms when nowhere was asked for', () => {
    expect(safePath(null)).toBe('/');
    expect(safePath('')).toBe('/');
  });

  // OWASP's unvalidated-redirect list: scheme-relative, backslashes, controls that browsers drop, other schemes.
  it.each([
    'https://evil.example/',
    '//evil.example',
    '///evil.example',
    '/\\evil.example',
    '\\\\evil.example',
    '/\t/evil.example',
    '/\n/evil.example',
    'javascript:alert(1)',
    'data:text/html,x',
    'evil.example',
    ' //evil.example',
  ])('leads to the arms instead of %j', (to) => {
    expect(safePath(to)).toBe('/');
  });

  it('never leaves this origin, whatever stands in the address', () => {
    const nasty = fc.oneof(
      fc.string(),
      fc.webUrl(),
      fc.string({
        unit: fc.constantFrom('/', '\\', '\t', '\n', ':', '@', '.', 'a', '%', '2', 'f', '?', '#'),
      }),
    );
    fc.assert(
      fc.property(nasty, (to) => {
        const url = new URL(safePath(to), 'http://own.example:4310');
        expect(url.origin).toBe('http://own.example:4310');
      }),
      { numRuns: 2000 },
    );
  });
});
