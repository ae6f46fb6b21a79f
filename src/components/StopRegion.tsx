import { StopStateIcon } from './icons';

const SAYS = {
  ready: 'ready',
  sent: 'sent',
  acknowledged: 'acknowledged',
  noAnswer: 'No answer. Switch the supply off.',
};

/** Stop with its sentence and its state: always there, never covered, acts on press. */
export function StopRegion({
  state,
  onStop,
  label = 'Stop arm',
  nothing = false,
}: {
  state: keyof typeof SAYS;
  onStop: () => void;
  label?: string;
  /** There is no arm at all. */
  nothing?: boolean;
}) {
  if (nothing)
    return (
      <section className="stopcell" aria-label="Stop">
        <div className="stopsay" role="status">
          <b className="ss">no arm</b>
          <span>Nothing to stop yet. Build or choose an arm.</span>
        </div>
        <button type="button" className="stop none" disabled>
          <i />
          <b>{label}</b>
        </button>
      </section>
    );
  return (
    <section className="stopcell" aria-label="Stop">
      <div className={`stopsay ${state === 'noAnswer' ? 'lost' : ''}`} role="status">
        <b className="ss">
          <StopStateIcon state={state} />
          <span>{SAYS[state]}</span> {state !== 'noAnswer' && <kbd>Esc</kbd>}
        </b>
        <span>Software stop, not an emergency stop. Keep a hand on the supply switch.</span>
      </div>
      <button
        type="button"
        className="stop"
        data-stop
        onPointerDown={(event) => {
          event.preventDefault();
          onStop();
        }}
        onClick={(event) => {
          // Keyboard and assistive technology come without a pointer press.
          if (event.detail === 0) onStop();
        }}
      >
        <i />
        <b>{label}</b>
      </button>
    </section>
  );
}
