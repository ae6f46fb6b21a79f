import type { Config } from 'tailwindcss';

const token = (name: string) => `var(--er-${name})`;

/** Utility names for the drawing sheet's tokens; the values live in src/components/look/tokens.css. */
export default {
  content: ['./index.html', './src/**/*.{ts,tsx}'],
  theme: {
    extend: {
      colors: {
        desk: token('desk'),
        sheet: token('sheet'),
        card: token('card'),
        well: token('well'),
        ink: { DEFAULT: token('ink'), 2: token('ink-2'), 3: token('ink-3') },
        edge: token('edge'),
        rule: token('rule'),
        plan: { DEFAULT: token('plan'), line: token('plan-line'), wash: token('plan-wash') },
        move: { DEFAULT: token('move'), edge: token('move-edge'), wash: token('move-wash') },
        fault: { DEFAULT: token('fault'), ink: token('fault-ink'), wash: token('fault-wash') },
      },
      fontFamily: { prose: token('prose'), figures: token('figures') },
    },
  },
} satisfies Config;
