import { afterEach } from 'vitest';

// Component tests (those that ask for jsdom) clean up after themselves.
if (typeof document !== 'undefined') {
  await import('@testing-library/jest-dom/vitest');
  const { cleanup } = await import('@testing-library/react');
  afterEach(cleanup);
}
