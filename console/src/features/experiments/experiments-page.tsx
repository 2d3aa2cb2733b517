import { Empty, Page } from '../../components/index.js';

export function ExperimentsPage() {
  return (
    <Page title="Experiments">
      <Empty title="Nothing here yet." />
    </Page>
  );
}
