import type { Theme } from '@mui/material/styles';

/** The drawing library in ink on chart paper. */
export const drawingStyles = (theme: Theme) => {
  const { paper, text, background } = theme.vars.palette;
  return {
    '& .react-flow': { backgroundColor: background.default },
    '& .react-flow__background-pattern': { stroke: paper.grid },
    '& .react-flow__edge-path': { stroke: text.secondary, strokeWidth: 1.25 },
    '& .react-flow__edge.selected .react-flow__edge-path, & .react-flow__edge:focus-visible .react-flow__edge-path':
      {
        stroke: text.primary,
        strokeWidth: 2.5,
      },
    '& .react-flow__connection-path': { stroke: text.primary, strokeWidth: 1.5 },
    '& .react-flow__arrowhead polyline': { stroke: text.secondary, fill: text.secondary },
    '& .step-port': {
      width: 11,
      height: 11,
      borderRadius: 0,
      border: `1px solid ${text.primary}`,
      backgroundColor: background.paper,
    },
    '& .step-port:hover, & .step-port.connectingto, & .step-port.connectingfrom': {
      backgroundColor: text.primary,
    },
    '& .react-flow__node:focus-visible': { outline: `2px solid ${text.primary}`, outlineOffset: '3px' },
    '& .react-flow__controls': { boxShadow: 'none', border: `1px solid ${paper.outline}` },
    '& .react-flow__controls-button': {
      backgroundColor: background.paper,
      color: text.primary,
      fill: text.primary,
      borderColor: paper.rule,
    },
    '& .react-flow__attribution': { backgroundColor: 'transparent', color: text.secondary },
    '& .react-flow__attribution a': { color: text.secondary },
    '& .react-flow__minimap': { backgroundColor: background.paper, border: `1px solid ${paper.outline}` },
  };
};
