import Box from '@mui/material/Box';

/** Stands where something is still being loaded; said to screen readers, still to the eye. */
export function Loading({ what }: { what: string }) {
  return (
    <Box role="status" sx={{ color: 'text.secondary', py: 1 }}>
      Loading {what} …
    </Box>
  );
}
