import { Notice } from '../../components/index.js';
import type { RigStatus } from '@cresthold/shared';

/** What stands in the way of arming, in words, while the rig is idle. */
export function ArmingObstacles({ status }: { status: RigStatus | null }) {
  if (status?.phase !== 'idle' || status.armingObstacles.length === 0) return null;
  return (
    <Notice kind="act" title="Before arming">
      <ul style={{ margin: 0, paddingLeft: '1.25rem' }}>
        {status.armingObstacles.map((obstacle) => (
          <li key={obstacle}>{obstacle}</li>
        ))}
      </ul>
    </Notice>
  );
}
