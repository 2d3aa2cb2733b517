import { Loading, Notice, Page, ProblemNotice } from '../../components/index.js';
import { AdapterPanel } from './adapter-panel.js';
import { useAdapters } from './api/adapters.js';

/** The adapters of this server: those that ship, and plug-ins with what is wrong with the broken ones. */
export function AdaptersPage() {
  const adapters = useAdapters();
  const broken = adapters.data?.filter(({ state }) => state === 'broken') ?? [];
  return (
    <Page
      title="Adapters"
      lead="Each speaks one protocol. Plug-ins are named in CRESTHOLD_PLUGINS and loaded when the server starts."
    >
      {adapters.isPending && <Loading what="adapters" />}
      {adapters.error !== null && (
        <ProblemNotice
          title="The adapters could not be loaded"
          error={adapters.error}
          onRetry={() => void adapters.refetch()}
        />
      )}
      {broken.length > 0 && (
        <Notice
          kind="warn"
          title={broken.length === 1 ? 'A plug-in is broken' : `${broken.length} plug-ins are broken`}
        >
          It is left out; everything else works. Mend or remove it, then start the server again.
        </Notice>
      )}
      {adapters.data?.map((adapter) => (
        <AdapterPanel key={`${adapter.reference ?? ''}:${adapter.id ?? adapter.title}`} adapter={adapter} />
      ))}
    </Page>
  );
}
