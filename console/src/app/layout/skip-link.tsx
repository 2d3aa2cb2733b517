import Box from '@mui/material/Box';

/** First stop of the keyboard: past the heads of the page. */
export function SkipLink() {
  return (
    <Box
      component="a"
      href="#content"
      sx={{
        position: 'absolute',
        left: 8,
        top: -80,
        zIndex: 'tooltip',
        p: 1,
        bgcolor: 'background.paper',
        color: 'text.primary',
        border: 1,
        '&:focus': { top: 8 },
      }}
    >
      To the page
    </Box>
  );
}
