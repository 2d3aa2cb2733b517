import Box from '@mui/material/Box';

/** Least lengths of NIST SP 800-63B-4: alone, and beside a second factor. */
const minAlone = 15;
const minBesideFactor = 8;

/**
 * What is missing to a new password, by its length alone: nothing of it is sent or shown before it is set.
 *
 * @example
 * passwordObstacle('owl kite', false) // '7 characters more are needed.'
 */
export function passwordObstacle(password: string, hasSecondFactor: boolean): string | null {
  const min = hasSecondFactor ? minBesideFactor : minAlone;
  const more = min - [...password.normalize('NFKC')].length;
  if (more <= 0) return null;
  return more === 1 ? 'One character more is needed.' : `${more} characters more are needed.`;
}

interface PasswordHintProps {
  password: string;
  hasSecondFactor: boolean;
}

/** Says how to make a good password, and when it is long enough. */
export function PasswordHint({ password, hasSecondFactor }: PasswordHintProps) {
  const obstacle = passwordObstacle(password, hasSecondFactor);
  return (
    <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary' }} aria-live="polite">
      {password === '' || obstacle !== null
        ? `A few words that do not belong together are long and easy to type. ${obstacle ?? ''}`
        : 'Long enough. Common passwords and names of this station are refused.'}
    </Box>
  );
}
