import ButtonBase from '@mui/material/ButtonBase';

interface StopAllButtonProps {
  isSending: boolean;
  onPress: () => void;
}

/** Stops every rig while a page is about one of them. One press, no confirmation. */
export function StopAllButton({ isSending, onPress }: StopAllButtonProps) {
  return (
    <ButtonBase
      onClick={onPress}
      aria-describedby="stop-is-software"
      sx={(theme) => ({
        bgcolor: 'background.paper',
        color: 'paper.trip',
        border: 2,
        borderColor: 'paper.stopFace',
        minHeight: 48,
        px: 1.5,
        fontFamily: 'inherit',
        fontWeight: 700,
        fontSize: '0.8125rem',
        '&:focus-visible': { outline: `4px solid ${theme.vars.palette.text.primary}`, outlineOffset: 0 },
      })}
    >
      {isSending ? 'STOPPING …' : 'ALL RIGS'}
    </ButtonBase>
  );
}
