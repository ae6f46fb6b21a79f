import { useRouteError } from 'react-router-dom';

/** A page that could not be shown. The arm is not the page's: it goes on or stops by its own rules. */
export function RouteError() {
  const error = useRouteError();
  const message = error instanceof Error ? error.message : 'Something on this page went wrong.';
  return (
    <main className="paper">
      <h1 className="title">This page could not be shown</h1>
      <p>{message}</p>
      <p className="quiet">
        A hold you had has ended. If an arm moves, stop it at its supply switch; then load the page again.
      </p>
      <button type="button" className="btn ink" onClick={() => location.reload()}>
        Load again
      </button>
    </main>
  );
}
