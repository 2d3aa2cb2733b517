import { Empty, Page } from '../../components/index.js';

export function RunsPage() {
  return (
    <Page title="Runs">
      <Empty title="Nothing here yet." />
    </Page>
  );
}
