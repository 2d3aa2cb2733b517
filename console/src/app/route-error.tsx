import { isRouteErrorResponse, useRouteError } from 'react-router-dom';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { Notice } from '../components/index.js';
import { NotFoundPage } from './not-found-page.js';

/** A page that could not be loaded or drawn; the strip with the emergency stop stays above it. */
export function RouteError() {
  const error = useRouteError();
  if (isRouteErrorResponse(error) && error.status === 404) return <NotFoundPage />;
  return (
    <Box sx={{ p: 3 }}>
      <Notice
        kind="warn"
        role="alert"
        title="This page cannot be shown"
        actions={<Button onClick={() => window.location.reload()}>Load again</Button>}
      >
        The console met a fault of its own, or a newer version was installed. The rigs are not affected.
      </Notice>
    </Box>
  );
}
