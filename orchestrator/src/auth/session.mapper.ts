import type { SignedInPlaces } from './dto/session.dto.js';
import type { SessionEntity } from './entities/session.entity.js';

/** @param thisId session that asks; null where it is none of them */
export function toPlaces(rows: readonly SessionEntity[], thisId: string | null): SignedInPlaces {
  return {
    items: rows.map(({ id, userAgent, address, beganAt, lastSeenAt }) => ({
      ...{ id, userAgent, address, beganAt, lastSeenAt },
      isThis: id === thisId,
    })),
  };
}
