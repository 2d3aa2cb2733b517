import { Empty, Page } from '../../components/index.js';

export function EnvelopePage() {
  return (
    <Page title="Envelope">
      <Empty title="Nothing here yet." />
    </Page>
  );
}
