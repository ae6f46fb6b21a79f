import { useCallback, useEffect, useRef, useState } from 'react';
import { api } from '../../api/client';

export type StopWord = 'ready' | 'sent' | 'acknowledged' | 'noAnswer';

/** Silence for this long and the page asks for the supply switch, ms; as on an arm's own page. */
const ANSWER_MS = 300;
/** An old acknowledgement says nothing of what moves now: back to ready, ms. */
const SHOWN_MS = 5000;

/**
 * Stop of the workshop's pages: every arm, over HTTP, never through the query cache. Only the newest press speaks,
 * and an answer that comes after all is shown as one.
 */
export function useStopEveryArm(): { word: StopWord; stop: () => void } {
  const [word, setWord] = useState<StopWord>('ready');
  const press = useRef(0);
  const timer = useRef<number | undefined>(undefined);
  useEffect(() => () => window.clearTimeout(timer.current), []);
  const stop = useCallback(() => {
    press.current += 1;
    const mine = press.current;
    const say = (next: StopWord) => mine === press.current && setWord(next);
    window.clearTimeout(timer.current);
    setWord('sent');
    timer.current = window.setTimeout(() => say('noAnswer'), ANSWER_MS);
    void api.post('/stop', {}, null).then(
      () => {
        if (mine !== press.current) return;
        window.clearTimeout(timer.current);
        setWord('acknowledged');
        timer.current = window.setTimeout(() => say('ready'), SHOWN_MS);
      },
      () => {
        if (mine !== press.current) return;
        window.clearTimeout(timer.current);
        setWord('noAnswer');
      },
    );
  }, []);
  return { word, stop };
}
