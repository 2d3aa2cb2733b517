import { Panel } from '../../components/index.js';
import { DraftProvider, type DraftForm } from './form/draft-context.js';
import { EmergencyStopsEditor } from './form/emergency-stops-editor.js';
import { InterlocksEditor } from './form/interlocks-editor.js';
import { LimitsTable } from './form/limits-table.js';
import { WatchEditor } from './form/watch-editor.js';

/** All of an envelope, to be read or edited. */
export function EnvelopeSheet({ form }: { form: DraftForm }) {
  return (
    <DraftProvider form={form}>
      <Panel title="Actuator limits">
        <LimitsTable />
      </Panel>
      <Panel title="Interlocks">
        <InterlocksEditor />
      </Panel>
      <Panel title="Emergency-stop inputs">
        <EmergencyStopsEditor />
      </Panel>
      <Panel title="Watches">
        <WatchEditor />
      </Panel>
    </DraftProvider>
  );
}
