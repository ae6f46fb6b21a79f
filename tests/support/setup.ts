import fc from 'fast-check';
import { afterEach } from 'vitest';

// The same cases for everybody; FC_SEED looks at others.
fc.configureGlobal({ seed: Number(process.env.FC_SEED ?? 20_261_201) });

// Component tests (those that ask for jsdom) clean up after themselves.
if (typeof document !== 'undefined') {
  await import('@testing-library/jest-dom/vitest');
  const { cleanup } = await import('@testing-library/react');
  afterEach(cleanup);
}
