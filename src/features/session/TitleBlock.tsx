import './session.css';
import './session-more.css';
import type { ReactNode } from 'react';
import { BrandMark } from '../../components/icons';

/** The title block of an empty sheet: where people come in. */
export function TitleBlock({ title, children }: { title: string; children: ReactNode }) {
  return (
    <div className="sgn">
      <main className="sheet">
        <div className="nt">
          <h2 className="title">Jog it slowly, teach it once, run it all day.</h2>
          <p>
            The page beside a robot arm you built yourself. It is not a safety device: keep a hand on the
            switch in the motor supply.
          </p>
        </div>
        <div className="tb">
          <div className="a">
            <BrandMark />
            <div>
              <b>Elbowroom</b>
              <span>{title}</span>
            </div>
          </div>
          {children}
        </div>
      </main>
    </div>
  );
}
