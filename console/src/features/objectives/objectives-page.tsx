import { Empty, Page } from '../../components/index.js';

export function ObjectivesPage() {
  return (
    <Page title="Objectives">
      <Empty title="Nothing here yet." />
    </Page>
  );
}
