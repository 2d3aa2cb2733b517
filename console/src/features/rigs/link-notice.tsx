import { Notice } from '../../components/index.js';
import { useLinkState } from '../../live/index.js';

/** Says plainly that what is on the screen is the past. */
export function LinkNotice() {
  const link = useLinkState();
  if (link !== 'lost') return null;
  return (
    <Notice kind="warn" role="alert" title="Live data lost, reconnecting …">
      What you see is the last known state, not the present one. The rig goes on without this screen.
    </Notice>
  );
}
