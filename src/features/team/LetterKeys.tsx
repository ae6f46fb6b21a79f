import { useState } from 'react';
import { letterKeysOn, setLetterKeys } from '../../components/letter-keys';

/** Single-letter keys may be in the way of speech input: they can be switched off, for this browser. */
export function LetterKeys() {
  const [on, setOn] = useState(letterKeysOn);
  return (
    <section className="stack">
      <h2 className="h2">Keys</h2>
      <label className="tick">
        <input
          type="checkbox"
          checked={on}
          onChange={(event) => {
            setLetterKeys(event.target.checked);
            setOn(event.target.checked);
          }}
        />
        single letters act: C captures a pose, G held goes to the chosen one
      </label>
      <p className="small quiet">Esc is Stop, everywhere, whatever is chosen here.</p>
    </section>
  );
}
