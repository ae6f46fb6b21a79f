import './session.css';
import type { ReactNode } from 'react';
import { BENCH } from '../../components/drawings/bench';
import { Strokes } from '../../components/drawings/Drawing';
import { BrandMark } from '../../components/icons';
import { useTitle } from '../../components/use-title';

/** The sheet where people come in: a drawing, and the title block with the form in its corner. */
export function TitleBlock({
  sheet,
  workshop,
  intro,
  children,
}: {
  /** What this sheet is, as the title block and the browser's tab name it. */
  sheet: string;
  /** Empty before it has a name, or before the server said it. */
  workshop: string;
  intro: string;
  children: ReactNode;
}) {
  useTitle(sheet, workshop);
  return (
    <div className="sgn">
      <main className="sheet">
        <svg className="dwg" viewBox="0 0 1408 868" preserveAspectRatio="xMinYMid slice" aria-hidden="true">
          <Strokes of={BENCH} />
          <text x="862.6" y="554.2">
            up
          </text>
          <text x="384" y="657.7" textAnchor="middle">
            out
          </text>
        </svg>
        <div className="nt">
          <p className="big">{workshop || sheet}</p>
          <p>{intro}</p>
        </div>
        <div className="tb">
          <div className="a">
            <BrandMark />
            <div>
              <b>Elbowroom</b>
              <span className="tag-line">Jog it slowly, teach it once, run it all day</span>
              <span className="at-workshop">{workshop || sheet}</span>
            </div>
          </div>
          {children}
          <dl className="m">
            <div>
              <dt>Workshop</dt>
              <dd>{workshop || 'not named yet'}</dd>
            </div>
            <div>
              <dt>Scale</dt>
              <dd>none</dd>
            </div>
            <div>
              <dt>Sheet</dt>
              <dd>{sheet}</dd>
            </div>
          </dl>
        </div>
      </main>
    </div>
  );
}
