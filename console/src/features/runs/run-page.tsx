import { Empty, Page } from '../../components/index.js';

export function RunPage() {
  return (
    <Page title="Run">
      <Empty title="Nothing here yet." />
    </Page>
  );
}
