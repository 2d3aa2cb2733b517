import { Suspense, useEffect, useRef } from 'react';
import { Outlet, useLocation } from 'react-router-dom';
import Box from '@mui/material/Box';
import { Loading } from '../../components/index.js';
import { RigInViewProvider, SafetyStrip } from '../../features/rigs/index.js';
import { AccountMenu } from './account-menu.js';
import { Navigation } from './navigation.js';
import { SchemeSwitch } from './scheme-switch.js';
import { SkipLink } from './skip-link.js';

/** What surrounds every page: places and account, the strip with the emergency stop, the page. */
export function Shell() {
  return (
    <RigInViewProvider>
      <SkipLink />
      <Box
        component="header"
        sx={{
          px: { xs: 1.5, sm: 2, lg: 3 },
          py: 0.5,
          display: 'flex',
          flexWrap: 'wrap',
          alignItems: 'center',
          columnGap: { xs: 1, sm: 3 },
          rowGap: 0.25,
          borderBottom: 1,
          borderColor: 'divider',
        }}
      >
        <Box sx={{ fontWeight: 700, letterSpacing: { xs: '0.05em', sm: '0.22em' }, fontSize: '0.875rem' }}>
          CRESTHOLD
        </Box>
        <Navigation />
        <Box sx={{ ml: 'auto', display: 'flex', alignItems: 'center', gap: 1, minWidth: 0 }}>
          <SchemeSwitch />
          <AccountMenu />
        </Box>
      </Box>
      {/* Above dialogs and their backdrops too: the emergency stop is one press away whatever is open. */}
      <Box sx={{ position: 'sticky', top: 0, zIndex: (theme) => theme.zIndex.modal + 100 }}>
        <SafetyStrip />
      </Box>
      <Main />
    </RigInViewProvider>
  );
}

function Main() {
  const { pathname } = useLocation();
  const ref = useRef<HTMLElement>(null);
  const isFirst = useRef(true);
  useEffect(() => {
    if (isFirst.current) isFirst.current = false;
    else ref.current?.focus({ preventScroll: true });
  }, [pathname]);
  return (
    <Box component="main" id="content" ref={ref} tabIndex={-1} sx={{ maxWidth: 1840, mx: 'auto' }}>
      <Suspense
        fallback={
          <Box sx={{ p: 3 }}>
            <Loading what="page" />
          </Box>
        }
      >
        <Outlet />
      </Suspense>
    </Box>
  );
}
