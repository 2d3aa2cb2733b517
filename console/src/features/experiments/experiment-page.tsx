import { Empty, Page } from '../../components/index.js';

export function ExperimentPage() {
  return (
    <Page title="Experiment">
      <Empty title="Nothing here yet." />
    </Page>
  );
}
