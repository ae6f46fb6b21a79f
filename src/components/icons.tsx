import type { ReactNode, SVGProps } from 'react';

/** Small drawings in the stroke of the sheet. All decorative: the word beside each says the same. */
const strokes = {
  fill: 'none',
  stroke: 'currentColor',
  strokeWidth: 1.75,
  strokeLinecap: 'round',
  strokeLinejoin: 'round',
  'aria-hidden': true,
} as const;

function Icon({
  children,
  box = 20,
  ...rest
}: { children: ReactNode; box?: number } & SVGProps<SVGSVGElement>) {
  return (
    <svg viewBox={`0 0 ${box} ${box}`} {...strokes} {...rest}>
      {children}
    </svg>
  );
}
const solid = { fill: 'currentColor', stroke: 'none' } as const;

export const BrandMark = () => (
  <svg viewBox="0 0 30 30" {...strokes}>
    <path d="M5 25 L11.5 8 L25 15.5" strokeWidth="3" />
    <path d="M8.8 22.4A9.6 9.6 0 0 1 20.6 18" strokeWidth="1.3" strokeDasharray="1.6 2.4" />
    <circle cx="11.5" cy="8" r="3.4" fill="var(--er-desk)" strokeWidth="2" />
    <path d="M1.5 27.5h9" strokeWidth="2" />
  </svg>
);
export const ChevronDown = () => (
  <Icon box={12} width={12} height={12}>
    <path d="m2.5 4.5 3.5 3.5 3.5-3.5" />
  </Icon>
);
export const MenuIcon = () => (
  <Icon box={22} width={24} height={24}>
    <path d="M3 6h16M3 11h16M3 16h10" />
  </Icon>
);
export const LockIcon = () => (
  <Icon box={18}>
    <rect x="3.5" y="8" width="11" height="7.5" />
    <path d="M6 8V5.5a3 3 0 0 1 6 0V8" />
  </Icon>
);
export const WarnIcon = () => (
  <Icon>
    <path d="M10 2.5 18.5 17h-17Z" />
    <path d="M10 8v4.5M10 14.8v.2" strokeWidth="2" />
  </Icon>
);
export const FaultIcon = () => (
  <Icon>
    <path d="M10 .8 19.2 10 10 19.2.8 10Z" {...solid} />
    <path d="m7 7 6 6m0-6-6 6" stroke="var(--er-card)" strokeWidth="2.4" />
  </Icon>
);
export const MovingIcon = () => (
  <Icon>
    <path d="M3 4.5 8 10l-5 5.5M8 4.5 13 10l-5 5.5M13 4.5 18 10l-5 5.5" strokeWidth="2.2" />
  </Icon>
);
const MOTORS: Record<string, ReactNode> = {
  resting: (
    <>
      <path d="M3 16h14" strokeWidth="2" />
      <path d="M5 12.5h10" strokeDasharray="1.5 3" />
    </>
  ),
  energising: (
    <>
      <path d="M6 4H3.5v12H6M14 4h2.5v12H14" strokeWidth="2" strokeDasharray="2 3" />
      <rect x="7" y="7" width="6" height="6" {...solid} />
    </>
  ),
  standing: (
    <>
      <path d="M6 4H3.5v12H6M14 4h2.5v12H14" strokeWidth="2" />
      <rect x="7" y="7" width="6" height="6" {...solid} />
    </>
  ),
  moving: <path d="M3 4.5 8 10l-5 5.5M8 4.5 13 10l-5 5.5M13 4.5 18 10l-5 5.5" strokeWidth="2.2" />,
  stopping: (
    <>
      <path d="M3 4.5 8 10l-5 5.5M9 6.5 12 10l-3 3.5" strokeWidth="2.2" />
      <path d="M16.5 3v14" strokeWidth="3" />
    </>
  ),
  faulted: (
    <>
      <path d="M10 .8 19.2 10 10 19.2.8 10Z" {...solid} />
      <path d="m7 7 6 6m0-6-6 6" stroke="var(--er-fault)" strokeWidth="2.4" />
    </>
  ),
};
export const MotorsIcon = ({ state }: { state: string }) => <Icon>{MOTORS[state]}</Icon>;

const TRUST: Record<string, ReactNode> = {
  unknown: (
    <>
      <circle cx="10" cy="10" r="7.6" strokeDasharray="1 3.1" strokeWidth="2" />
      <path d="M7.8 8.2c.2-3 4.5-2.9 4.5-.2 0 1.8-2.3 1.7-2.3 3.6" strokeWidth="1.6" />
      <circle cx="10" cy="14" r=".6" fill="currentColor" strokeWidth=".8" />
    </>
  ),
  doubtful: (
    <>
      <path d="M10 2.4a7.6 7.6 0 0 1 7.6 7.6M10 17.6A7.6 7.6 0 0 1 2.4 10" strokeWidth="2" />
      <path d="M10 6v5M10 14v.2" strokeWidth="2" />
    </>
  ),
  declared: (
    <>
      <circle cx="10" cy="10" r="7.2" strokeWidth="2" strokeDasharray="4 3" />
      <circle cx="10" cy="10" r="2.3" {...solid} />
    </>
  ),
  referenced: (
    <>
      <circle cx="10" cy="10" r="6.6" strokeWidth="2" />
      <path d="M10 .8v18.4M.8 10h18.4" strokeWidth="1.4" />
      <circle cx="10" cy="10" r="2.3" {...solid} />
    </>
  ),
};
export const TrustIcon = ({ trust }: { trust: string }) => <Icon>{TRUST[trust]}</Icon>;

export const LinkIcon = ({ lost = false }: { lost?: boolean }) => (
  <Icon>
    <circle cx="4" cy="10" r="2.6" {...solid} />
    <circle cx="16" cy="10" r="2.6" {...solid} />
    <path d={lost ? 'M7.5 10h1M11.5 10h1' : 'M4 10h12'} strokeWidth="2" />
  </Icon>
);

/** A wedge filled as far as the ceiling allows. */
export function CeilingIcon({ fraction }: { fraction: number }) {
  const x = 2 + 16 * Math.sqrt(Math.min(1, fraction));
  const y = 16.5 - 12.5 * Math.sqrt(Math.min(1, fraction));
  return (
    <Icon>
      <path d="M2 16.5H18V4Z" strokeWidth="1.5" />
      <path d={`M2 16.5H${x}V${y}Z`} {...solid} />
    </Icon>
  );
}
export const MotorsOffIcon = () => (
  <Icon>
    <path d="M6 3.5H3v13h3M14 3.5h3v13h-3" strokeWidth="1.7" />
    <rect x="7" y="7" width="6" height="6" {...solid} />
    <path d="M4.5 19 15.5 1" stroke="var(--er-card)" strokeWidth="3.8" strokeLinecap="butt" />
    <path d="M4.6 18.8 15.4 1.2" strokeWidth="1.9" />
  </Icon>
);
export const StopStateIcon = ({ state }: { state: string }) => (
  <Icon box={18}>
    <rect
      x="3"
      y="3"
      width="12"
      height="12"
      strokeWidth="1.8"
      fill={state === 'acknowledged' ? 'currentColor' : 'none'}
    />
    {state === 'noAnswer' && <path d="M6 6l6 6M12 6l-6 6" strokeWidth="2" />}
    {state === 'sent' && <path d="M6 9h6" strokeWidth="2" />}
  </Icon>
);
export const PlayIcon = () => (
  <Icon box={22}>
    <path d="M6 3.5 18 11 6 18.5Z" {...solid} />
  </Icon>
);
export const StepIcon = () => (
  <Icon box={22}>
    <path d="M4 3.5 14 11 4 18.5Z" {...solid} />
    <path d="M17.5 4v14" strokeWidth="2.6" />
  </Icon>
);
export const PauseIcon = () => (
  <Icon box={22}>
    <path d="M7.5 4v14M14.5 4v14" strokeWidth="3.2" />
  </Icon>
);
const STEPS: Record<string, ReactNode> = {
  goTo: (
    <>
      <path d="M3 17C3 7 12 4 17 12" strokeWidth="2" />
      <path d="M18.8 16.6 12.8 13.6 18.6 9.6Z" {...solid} />
      <circle cx="3.4" cy="17.4" r="1.9" {...solid} />
    </>
  ),
  straightTo: (
    <>
      <path d="M4 15 14.5 6.5" strokeWidth="2" />
      <path d="m17.6 4-1.6 6-4.2-5.2Z" {...solid} />
      <circle cx="4" cy="15" r="2" {...solid} />
    </>
  ),
  grip: (
    <>
      <path d="M5 3v14M15 3v14" strokeWidth="2.4" />
      <path d="M7.5 10h5" strokeDasharray="1 2" />
    </>
  ),
  wait: (
    <>
      <path d="M5 3h10M5 17h10" strokeWidth="2" />
      <path d="M6 3c0 5 8 9 8 14M14 3c0 5-8 9-8 14" />
    </>
  ),
  again: (
    <>
      <path d="M4 8a6.5 6.5 0 0 1 12-1.5M16 12a6.5 6.5 0 0 1-12 1.5" strokeWidth="1.8" />
      <path d="M17.6 2.6V8h-5.2ZM2.4 17.4V12h5.2Z" {...solid} />
    </>
  ),
  remark: (
    <>
      <path d="M3 4h14v9H9l-4 4v-4H3Z" />
      <path d="M6 7.5h8M6 10h5" />
    </>
  ),
};
export const StepKindIcon = ({ kind }: { kind: string }) => <Icon>{STEPS[kind]}</Icon>;
export const DragIcon = () => (
  <Icon width={16} height={16}>
    <path d="M7 5v.2M13 5v.2M7 10v.2M13 10v.2M7 15v.2M13 15v.2" strokeWidth="2.6" />
  </Icon>
);
