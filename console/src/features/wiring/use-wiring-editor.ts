import { useMemo, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { useQueryClient } from '@tanstack/react-query';
import { changesMeaning, type Rig, type RigStatus } from '@cresthold/shared';
import { asProblem, type AdapterDocument, type RigDocument } from '../../api/index.js';
import { useObstacle } from '../auth/index.js';
import { useEnvelopeInForce } from '../envelopes/index.js';
import { rigKeys } from '../rigs/index.js';
import { useSaveRig, useScanBudget } from './api/wiring-queries.js';
import { joinFaults } from './draft/draft-faults.js';
import { bodyOf, draftOf, emptyDraft, rigOf } from './draft/rig-draft.js';
import {
  columnsByAdapter,
  columnsOfWires,
  useAddressColumns,
  useWiringDraft,
} from './draft/use-wiring-draft.js';
import { afterSaving } from './leave-guard.js';
import { useSettled } from './use-settled.js';

/** What a draft is based on: the rig as it was read or saved last; null for a new one. */
type Base = Pick<RigDocument, 'revision' | 'content'> | null;

const budgetAfterMs = 300;

/** The draft of a rig's wiring with everything that follows from it. */
export function useWiringEditor(
  rig: RigDocument | null,
  adapters: readonly AdapterDocument[],
  status: RigStatus | null,
) {
  const [base, setBase] = useState<Base>(rig);
  const byAdapter = useMemo(() => columnsByAdapter(adapters), [adapters]);
  const read = (content: Rig) => draftOf(content, columnsOfWires(wiresOf(content), byAdapter));
  const wiring = useWiringDraft(base ? read(base.content) : emptyDraft);
  const { draft } = wiring;
  const columnsOf = useAddressColumns(draft.connections, adapters);
  const { body, faults: own } = useMemo(() => bodyOf(draft, columnsOf), [draft, columnsOf]);
  const savedRows = base ? read(base.content) : null;
  const savedText = savedRows && JSON.stringify(savedRows);
  const isChanged = savedText === null ? draft !== emptyDraft : JSON.stringify(draft) !== savedText;
  const asked = useSettled(body, budgetAfterMs);
  const budget = useScanBudget(asked);
  const saving = useSaving({ base, setBase, body, isReadable: own.size === 0, wiring, read });
  const isSettled = asked === body && !budget.isPlaceholderData;
  const faults = joinFaults(own, isSettled ? (budget.data?.faults ?? []) : [], saving.isTried);
  return {
    wiring,
    columnsOf,
    faults,
    budget,
    isSettled,
    isChanged,
    ...saving,
    saved: base && savedRows ? { rig: base.content, rows: savedRows.rows } : null,
    obstacle: useSaveObstacle(isChanged, base === null, status),
    consequence: useConsequence(base, body),
    /** A revision that somebody else saved since; null where there is none. */
    newer: rig !== null && base !== null && rig.revision > base.revision ? rig : null,
    takeTheirs: (theirs: RigDocument) => {
      setBase(theirs);
      wiring.reset(read(theirs.content));
    },
    keepMine: setBase,
  };
}

function wiresOf({ connections }: Rig): string {
  return connections.map(({ id, adapter }) => `${id}:${adapter}`).join(' ');
}

interface SavingParts {
  base: Base;
  setBase: (base: Base) => void;
  body: Record<string, unknown>;
  /** Every cell can be read; else there is nothing to send. */
  isReadable: boolean;
  wiring: ReturnType<typeof useWiringDraft>;
  read: (content: Rig) => ReturnType<typeof draftOf>;
}

function useSaving({ base, setBase, body, isReadable, wiring, read }: SavingParts) {
  const [isTried, setTried] = useState(false);
  const save = useSaveRig();
  const navigate = useNavigate();
  const queryClient = useQueryClient();
  const onSaved = (saved: RigDocument) => {
    setTried(false);
    if (base === null) return void navigate(`/rigs/${saved.id}/wiring`, { state: afterSaving });
    setBase(saved);
    wiring.change(() => read(saved.content));
  };
  const onFailed = (error: unknown) => {
    // The newer revision is fetched, so that it can be chosen between the two.
    const isConflict = asProblem(error).code === 'request.precondition';
    if (isConflict) void queryClient.invalidateQueries({ queryKey: rigKeys.one(String(body['id'])) });
  };
  return {
    isTried,
    isSaving: save.isPending,
    saveError: save.error,
    save: () => {
      setTried(true);
      if (!isReadable) return;
      save.mutate({ body, revision: base?.revision ?? null }, { onSuccess: onSaved, onError: onFailed });
    },
  };
}

function useSaveObstacle(isChanged: boolean, isNew: boolean, status: RigStatus | null): string | null {
  const roleObstacle = useObstacle('rig.wire');
  if (roleObstacle !== null) return roleObstacle;
  if (!isChanged) return isNew ? 'Nothing is entered yet.' : 'Everything is saved.';
  const phase = status?.phase ?? 'offline';
  if (['idle', 'offline', 'tripped'].includes(phase)) return null;
  return `The rig is ${phase}: disarm it or end its run first.`;
}

/** What saving would withdraw, in words; null where nothing, or where the draft is no rig yet. */
function useConsequence(base: Base, body: Record<string, unknown>): string | null {
  const envelope = useEnvelopeInForce(base?.content.id ?? '');
  return useMemo(() => {
    const after = rigOf(body);
    if (base === null || after === null || !changesMeaning(base.content, after)) return null;
    const calibrations = 'Calibrations of sensors that are wired otherwise are withdrawn.';
    if (!envelope) return `No envelope is in force. ${calibrations}`;
    return `The envelope in force (version ${envelope.version}) is withdrawn with it: the rig cannot be armed before a safety officer has approved another. ${calibrations}`;
  }, [base, body, envelope]);
}
