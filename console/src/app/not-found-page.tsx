import { Link } from 'react-router-dom';
import { Empty, Page } from '../components/index.js';

export function NotFoundPage() {
  return (
    <Page title="Nothing is at this address">
      <Empty title="The page may have moved, or the address has a slip in it.">
        <Link to="/">Go to the floor</Link>
      </Empty>
    </Page>
  );
}
