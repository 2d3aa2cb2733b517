import { Link } from 'react-router-dom';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { roleTitles, useSession, useSignOut } from '../../features/auth/index.js';

/** Who is signed in, as which roles, and the way out. */
export function AccountMenu() {
  const session = useSession();
  const signOut = useSignOut();
  const roleText = session.roles.map((role) => roleTitles[role]).join(', ');
  return (
    <Box sx={{ display: 'flex', alignItems: 'center', gap: 1, minWidth: 0 }}>
      <Box
        sx={{
          fontSize: { xs: '0.6875rem', sm: '0.75rem' },
          lineHeight: 1.3,
          textAlign: 'right',
          minWidth: 0,
        }}
      >
        <Box
          component={Link}
          to="/account"
          aria-label={`Your account: ${session.title}`}
          sx={{ fontWeight: 700, color: 'inherit' }}
        >
          {session.title}
        </Box>
        {roleText.toLowerCase() !== session.title.toLowerCase() && (
          <Box sx={{ color: 'text.secondary', display: { xs: 'none', sm: 'block' } }}>{roleText}</Box>
        )}
      </Box>
      <Button onClick={() => signOut.mutate()} disabled={signOut.isPending}>
        Sign out
      </Button>
    </Box>
  );
}
