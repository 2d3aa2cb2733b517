import { createContext, useContext, useEffect, useMemo, useState, type ReactNode } from 'react';

interface RigInView {
  rigId: string | null;
  setRigId: (rigId: string | null) => void;
}

const RigInViewContext = createContext<RigInView>({ rigId: null, setRigId: () => undefined });

export function RigInViewProvider({ children }: { children: ReactNode }) {
  const [rigId, setRigId] = useState<string | null>(null);
  const value = useMemo(() => ({ rigId, setRigId }), [rigId]);
  return <RigInViewContext value={value}>{children}</RigInViewContext>;
}

/** Id of the rig that the page is about; null where it is about none or several. */
export function useRigIdInView(): string | null {
  return useContext(RigInViewContext).rigId;
}

/** Says which rig this page is about, so that the emergency stop at the top is that rig's. */
export function useShowsRig(rigId: string | null | undefined): void {
  const { setRigId } = useContext(RigInViewContext);
  useEffect(() => {
    setRigId(rigId ?? null);
    return () => setRigId(null);
  }, [rigId, setRigId]);
}
