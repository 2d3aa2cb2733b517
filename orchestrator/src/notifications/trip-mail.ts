import type { Trip } from '@cresthold/shared';
import type { Mail } from './mailer.js';

/** The mail about a trip; says what it is not, so that nobody relies on it. */
export function tripMail(rigTitle: string, rigId: string, trip: Trip, to: readonly string[]): Mail {
  const by = trip.by === null ? '' : `Pressed by: ${trip.by}\n`;
  return {
    to,
    subject: `Cresthold: ${oneLine(rigTitle)} has tripped`,
    text:
      `Rig: ${rigTitle} (${rigId})\nFirst cause: ${trip.cause}\n${trip.message}\n${by}At: ${trip.at}\n\n` +
      'The rig stays tripped until a safety officer resets it.\n' +
      'This mail is no alarm to rely on: it can be late or lost.\n',
  };
}

function oneLine(text: string): string {
  return text.replace(/\s+/g, ' ');
}
