import type { ReactNode } from 'react';
import type { JointWords } from '../../shared/arm/model';

/** What a press will do, drawn: one picture per motion and direction. */
const solid = { fill: 'currentColor', stroke: 'none' } as const;
const joint = { r: 3.2, fill: 'var(--er-card)' } as const;

const PICTURES: Record<JointWords['picture'] | 'grip', { positive: ReactNode; negative: ReactNode }> = {
  turn: {
    negative: (
      <>
        <circle cx="20" cy="23" r="3.4" />
        <path d="M20 19.5 27 5" strokeDasharray="2 3" />
        <path d="M32.5 12.5A16.5 16.5 0 0 0 9 11" />
        <path d="M5.8 15.2L6.3 7.2L12.8 11.3Z" {...solid} />
      </>
    ),
    positive: (
      <>
        <circle cx="20" cy="23" r="3.4" />
        <path d="M20 19.5 13 5" strokeDasharray="2 3" />
        <path d="M7.5 12.5A16.5 16.5 0 0 1 31 11" />
        <path d="M34.2 15.2L27.2 11.3L33.7 7.2Z" {...solid} />
      </>
    ),
  },
  lift: {
    positive: (
      <>
        <path d="M9 24 30 16.5" strokeWidth="3" />
        <path d="M9 24 22 5" strokeDasharray="2 3" strokeWidth="1.3" />
        <circle cx="9" cy="24" {...joint} />
        <path d="M35.2 14.5A27 27 0 0 0 30.5 6.8" />
        <path d="M26.8 3.2L34.5 5.3L29.2 10.8Z" {...solid} />
      </>
    ),
    negative: (
      <>
        <path d="M9 24 29 9.5" strokeWidth="3" />
        <path d="M9 24h24" strokeDasharray="2 3" strokeWidth="1.3" />
        <circle cx="9" cy="24" {...joint} />
        <path d="M34 8.5c1.6 2.6 2.3 5.5 2.2 8" />
        <path d="M35.6 21.5L32.8 14.0L40.4 15.1Z" {...solid} />
      </>
    ),
  },
  fold: {
    positive: (
      <>
        <path d="M8 26 13 9" strokeWidth="3" />
        <path d="M13 9 27 22" strokeWidth="3" />
        <circle cx="13" cy="9" {...joint} />
        <path d="M31.5 19.5A22 22 0 0 0 34.5 12" />
        <path d="M34.6 6.4L38.9 13.1L31.3 13.7Z" {...solid} />
      </>
    ),
    negative: (
      <>
        <path d="M8 26 15 8" strokeWidth="3" />
        <path d="M15 8 34 17" strokeWidth="3" />
        <circle cx="15" cy="8" {...joint} />
        <path d="M29 20.5A16 16 0 0 1 23 25" />
        <path d="M18.0 25.8L24.4 21.0L25.5 28.6Z" {...solid} />
      </>
    ),
  },
  tilt: {
    positive: (
      <>
        <path d="M4 20h14" strokeWidth="3" />
        <path d="M18 20 33 9" strokeWidth="3" />
        <circle cx="18" cy="20" {...joint} />
        <path d="M36.5 18.5C37 13 35 9 32 6.5" />
        <path d="M28 3 36 3.5 31.5 10Z" {...solid} />
      </>
    ),
    negative: (
      <>
        <path d="M4 10h14" strokeWidth="3" />
        <path d="M18 10 33 21" strokeWidth="3" />
        <circle cx="18" cy="10" {...joint} />
        <path d="M36.5 11.500C37 17 35 21 32 23.5" />
        <path d="M28 27 36 26.5 31.5 20Z" {...solid} />
      </>
    ),
  },
  roll: {
    negative: (
      <>
        <path d="M20 1.5v6" strokeWidth="3" />
        <path d="M13 8h14M15 8v8.5M25 8v8.5" strokeWidth="2.4" />
        <path d="M35 14C34 25 14 28 8 19.5" strokeWidth="1.9" />
        <path d="M4 13.8 11.8 16.8 4.4 22Z" {...solid} />
      </>
    ),
    positive: (
      <>
        <path d="M20 1.5v6" strokeWidth="3" />
        <path d="M13 8h14M15 8v8.5M25 8v8.5" strokeWidth="2.4" />
        <path d="M5 14C6 25 26 28 32 19.5" strokeWidth="1.9" />
        <path d="M36 13.8 28.2 16.8 35.600 22Z" {...solid} />
      </>
    ),
  },
  slide: {
    positive: (
      <>
        <path d="M8 26h24" strokeWidth="3" />
        <path d="M20 21V11" />
        <path d="M20.0 3.5L23.8 10.5L16.2 10.5Z" {...solid} />
      </>
    ),
    negative: (
      <>
        <path d="M8 26h24" strokeWidth="3" />
        <path d="M20 3v10" />
        <path d="M20.0 21.5L16.2 14.5L23.8 14.5Z" {...solid} />
      </>
    ),
  },
  grip: {
    positive: (
      <>
        <path d="M11 5v20M29 5v20" strokeWidth="3" />
        <path d="M17.5 15h5" />
        <path d="M13.6 15.0L18.9 12.1L18.9 17.9Z" {...solid} />
        <path d="M26.4 15.0L21.1 17.9L21.1 12.1Z" {...solid} />
      </>
    ),
    negative: (
      <>
        <path d="M16 5v20M24 5v20" strokeWidth="3" />
        <path d="M3 15h6M37 15h-6" />
        <path d="M13.5 15.0L7.4 18.4L7.4 11.6Z" {...solid} />
        <path d="M26.5 15.0L32.6 11.6L32.6 18.4Z" {...solid} />
      </>
    ),
  },
};

/** Arrows for the six ways a tool goes: along three axes and about them, drawn as seen from the corner. */
const TOOL_WAYS: Record<string, [string, string]> = {
  x: ['M29 19 11 11', 'm7 9 7-.6-3.2 6.3Z'],
  y: ['M11 19 29 11', 'm33 9-3.8 5.7L26 8.4Z'],
  z: ['M20 25V9', 'm20 4 3.8 6.6h-7.6Z'],
};
export function ToolPictogram({ axis, direction }: { axis: string; direction: 1 | -1 }) {
  const [line, head] = TOOL_WAYS[axis.at(-1)!]!;
  const turns = axis.length === 2;
  // Positive x comes towards the left front of the picture, positive y goes to the left.
  const flip = direction > 0 === (axis.at(-1) === 'z');
  return (
    <svg
      viewBox="0 0 40 30"
      fill="none"
      stroke="currentColor"
      strokeWidth={1.75}
      strokeLinecap="round"
      strokeLinejoin="round"
      aria-hidden="true"
    >
      {turns ? (
        <>
          <path d={line} strokeDasharray="2 3" />
          <g transform={direction > 0 ? undefined : 'translate(40 0) scale(-1 1)'}>
            <path d="M9 18.5c0 3 5 5.5 11 5.5s11-2.5 11-5.5" strokeWidth="2" />
            <path d="m31 12.500 4 6.500h-8Z" {...solid} />
          </g>
        </>
      ) : (
        <g transform={flip ? undefined : 'rotate(180 20 15)'}>
          <path d={line} strokeWidth="2.4" />
          <path d={head} {...solid} />
          <circle cx="20" cy="15" r="2.6" {...solid} />
        </g>
      )}
    </svg>
  );
}

export function Pictogram({ picture, direction }: { picture: keyof typeof PICTURES; direction: 1 | -1 }) {
  return (
    <svg
      viewBox="0 0 40 30"
      fill="none"
      stroke="currentColor"
      strokeWidth={1.75}
      strokeLinecap="round"
      strokeLinejoin="round"
      aria-hidden="true"
    >
      {direction > 0 ? PICTURES[picture].positive : PICTURES[picture].negative}
    </svg>
  );
}
