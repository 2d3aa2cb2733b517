import { NavLink } from 'react-router-dom';
import Box from '@mui/material/Box';
import { useSession } from '../../features/auth/index.js';

const places = [
  { to: '/', label: 'Floor' },
  { to: '/experiments', label: 'Experiments' },
  { to: '/runs', label: 'Runs' },
  { to: '/objectives', label: 'Objectives' },
];

const administratorPlaces = [
  { to: '/people', label: 'People' },
  { to: '/adapters', label: 'Adapters' },
];

/** The places of the console; what a role has no business with is not there. */
export function Navigation() {
  const { roles } = useSession();
  const shown = roles.includes('administrator') ? [...places, ...administratorPlaces] : places;
  return (
    <Box
      component="nav"
      aria-label="Main"
      sx={{
        overflowX: 'auto',
        minWidth: 0,
        flex: { xs: '1 0 100%', md: '0 1 auto' },
        order: { xs: 1, md: 0 },
      }}
    >
      <Box component="ul" sx={{ display: 'flex', listStyle: 'none', m: 0, p: 0, gap: { xs: 0, sm: 0.5 } }}>
        {shown.map(({ to, label }) => (
          <li key={to}>
            <Box
              component={NavLink}
              to={to}
              end={to === '/'}
              sx={{
                display: 'block',
                px: { xs: 0.875, sm: 1 },
                py: 0.75,
                fontSize: { xs: '0.75rem', sm: '0.8125rem' },
                color: 'text.secondary',
                textDecoration: 'none',
                borderBottom: '2px solid transparent',
                '&:hover': { color: 'text.primary' },
                '&.active': { color: 'text.primary', fontWeight: 700, borderColor: 'text.primary' },
                '&:focus-visible': { outlineOffset: '-3px' },
              }}
            >
              {label}
            </Box>
          </li>
        ))}
      </Box>
    </Box>
  );
}
