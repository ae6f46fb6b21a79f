import { torqueWord } from '../../shared/arm/drives';

const CLASS = { roomy: 'roomy', fair: 'fair', tight: 'tight', 'none left': 'none' } as const;

/** Share of a drive's available torque that is used now: thickness, pattern, figure and word. */
export function TorqueUsed({ used, label = 'torque used' }: { used: number | null; label?: string }) {
  if (used === null)
    return (
      <div className="hr">
        <div className="hl" />
        <div className="ht">{label} – resting</div>
      </div>
    );
  const word = torqueWord(used);
  return (
    <div className="hr">
      <div
        className={`hl ${CLASS[word]}`}
        style={{ '--used': `${Math.min(100, used * 100)}%` } as React.CSSProperties}
      >
        <i />
      </div>
      <div className={`ht ${CLASS[word]}`}>
        {label} <span className="n">{Math.round(used * 100)} %</span> · {word}
      </div>
    </div>
  );
}
