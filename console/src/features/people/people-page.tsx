import { Empty, Page } from '../../components/index.js';

export function PeoplePage() {
  return (
    <Page title="People">
      <Empty title="Nothing here yet." />
    </Page>
  );
}
