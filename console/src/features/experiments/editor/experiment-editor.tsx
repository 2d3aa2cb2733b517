import { useMemo, useState } from 'react';
import Box from '@mui/material/Box';
import {
  type EnvelopeContent,
  type ExperimentGraph,
  type PreflightFault,
  type Rig,
  type StepKind,
} from '@cresthold/shared';
import type { ExperimentSummary, ExperimentVersion, ObjectiveDocument } from '../../../api/index.js';
import { GatedButton, Page } from '../../../components/index.js';
import { useRigStatus } from '../../../live/index.js';
import { useObstacle } from '../../auth/index.js';
import { useSaveVersion } from '../api/experiment-changes.js';
import { usePreflight } from '../api/experiment-queries.js';
import { GraphDrawing, type GraphEdits } from '../drawing/graph-drawing.js';
import { connect, moveStep, remove } from '../graph/edit-graph.js';
import type { StepDefaults } from '../graph/new-step.js';
import { StepInspector } from '../inspector/step-inspector.js';
import { addAfter } from './add-step.js';
import { EditorToolbar } from './editor-toolbar.js';
import { ExperimentHeadFields } from './experiment-head-fields.js';
import { PreflightPanel } from './preflight-panel.js';
import { SaveVersionDialog } from './save-version-dialog.js';
import { StartRunButton } from './start-run-button.js';
import { StepPalette } from './step-palette.js';
import { useDebounced } from './use-debounced.js';
import { useEditShortcuts } from './use-edit-shortcuts.js';
import { useExperimentDraft, type ExperimentDraft } from './use-experiment-draft.js';
import { VersionList } from './version-list.js';

interface ExperimentEditorProps {
  experiment: ExperimentSummary;
  version: ExperimentVersion;
  rig: Rig;
  envelope: EnvelopeContent | undefined;
  objectives: readonly ObjectiveDocument[];
}

const noFaults: PreflightFault[] = [];

/** The whole editor of one experiment: palette, drawing, form of the chosen step, preflight, versions. */
export function ExperimentEditor({ experiment, version, rig, envelope, objectives }: ExperimentEditorProps) {
  const obstacle = useObstacle('experiment.edit');
  const isReadOnly = obstacle !== null;
  const draft = useExperimentDraft(version.content);
  const { content, chosenStep, dispatch } = draft;
  useEditShortcuts(draft, isReadOnly);
  const checked = useDebounced(content, 300);
  const preflight = usePreflight(rig.id, checked);
  const status = useRigStatus(rig.id);
  const isChanged = content !== version.content;
  const changeGraph = (graph: ExperimentGraph, chosen?: string | null) =>
    dispatch({ type: 'change-graph', graph, ...(chosen === undefined ? {} : { chosenStep: chosen }) });
  const defaults: StepDefaults = {
    rig,
    rangeOf: (channel) => envelope?.limits.find((limit) => limit.channel === channel) ?? null,
  };
  const add = (kind: StepKind) => {
    const { graph, added } = addAfter(content.graph, kind, chosenStep?.id ?? null, defaults);
    changeGraph(graph, added);
  };
  const faults = preflight.data ?? noFaults;
  const isStartThere = content.graph.steps.some((step) => step.kind === 'start');
  return (
    <Page
      title={content.title}
      trail={`Experiment on ${rig.title}, version ${version.version}${isChanged ? ', changed since' : ''}`}
      actions={
        <>
          <SaveButton {...{ experiment, draft, obstacle, isChanged }} />
          <StartRunButton
            experimentId={experiment.id}
            version={version.version}
            status={status}
            faults={preflight.data}
            isChanged={isChanged}
          />
        </>
      }
    >
      <ExperimentHeadFields
        {...{ content, objectives, isReadOnly, rigId: rig.id }}
        onChange={(next) => dispatch({ type: 'change', content: next })}
      />
      <EditorToolbar draft={draft} isReadOnly={isReadOnly} />
      <Box sx={editorGrid}>
        <StepPalette
          unavailable={new Set<StepKind>(isStartThere ? ['start'] : [])}
          isReadOnly={isReadOnly}
          onAdd={add}
        />
        <Box sx={{ display: 'grid', gap: 2, minWidth: 0, order: { xs: 1, lg: 0 } }}>
          <GraphDrawing
            graph={content.graph}
            rig={rig}
            faults={faults}
            chosenStep={chosenStep?.id ?? null}
            heightPx="max(26rem, 58vh)"
            edits={useGraphEdits(draft, isReadOnly)}
          />
          <PreflightPanel
            faults={preflight.data}
            error={preflight.error}
            isChecking={preflight.isFetching}
            onChoose={(stepId) => dispatch({ type: 'choose', stepId })}
          />
          <VersionList experimentId={experiment.id} current={version.version} />
        </Box>
        <StepInspector
          {...{ rig, defaults, faults, isReadOnly }}
          graph={content.graph}
          step={chosenStep}
          onChange={(graph) => changeGraph(graph)}
          onRenamed={(id) => dispatch({ type: 'choose', stepId: id })}
          onRemove={(id) => changeGraph(remove(content.graph, new Set([id]), new Set()), null)}
        />
      </Box>
    </Page>
  );
}

const editorGrid = {
  display: 'grid',
  gap: 2,
  alignItems: 'start',
  gridTemplateColumns: { xs: 'minmax(0, 1fr)', lg: '12rem minmax(0, 1fr) 21rem' },
};

function useGraphEdits({ content, dispatch }: ExperimentDraft, isReadOnly: boolean): GraphEdits {
  const { graph } = content;
  return useMemo(() => {
    const change = (next: ExperimentGraph) => {
      if (!isReadOnly) dispatch({ type: 'change-graph', graph: next });
    };
    return {
      onMove: (id, position) => change(moveStep(graph, id, position)),
      onConnect: (from, port, to) => change(connect(graph, from, port, to)),
      onRemove: (steps, edges) => change(remove(graph, steps, edges)),
      onChoose: (stepId) => dispatch({ type: 'choose', stepId }),
    };
  }, [graph, dispatch, isReadOnly]);
}

interface SaveButtonProps {
  experiment: ExperimentSummary;
  draft: ExperimentDraft;
  obstacle: string | null;
  isChanged: boolean;
}

function SaveButton({ experiment, draft, obstacle, isChanged }: SaveButtonProps) {
  const [isOpen, setOpen] = useState(false);
  const save = useSaveVersion(experiment.id);
  const close = () => {
    save.reset();
    setOpen(false);
  };
  return (
    <>
      <GatedButton
        obstacle={obstacle ?? (isChanged ? null : 'Nothing has changed since the last version.')}
        onClick={() => setOpen(true)}
      >
        Save as version
      </GatedButton>
      {isOpen && (
        <SaveVersionDialog
          version={experiment.latestVersion + 1}
          error={save.error}
          isBusy={save.isPending}
          onSave={(note) =>
            save.mutate(
              { basedOn: experiment.latestVersion, note, content: draft.content },
              { onSuccess: close },
            )
          }
          onClose={close}
        />
      )}
    </>
  );
}
