import { Link } from 'react-router-dom';

export function Component() {
  return (
    <main className="paper">
      <h1 className="title">There is nothing at this address</h1>
      <Link to="/">Go to the arms</Link>
    </main>
  );
}
