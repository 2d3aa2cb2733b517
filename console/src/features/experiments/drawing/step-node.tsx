import { memo } from 'react';
import Box from '@mui/material/Box';
import { Handle, Position, type NodeProps } from '@xyflow/react';
import type { StepFlowNode } from '../graph/graph-mapper.js';

const marks = { error: 'Error', warning: 'Warning' } as const;

/** One step on the drawing: a slip of chart paper with its outcomes on the right edge. */
export const StepNode = memo(function StepNode({ data, selected }: NodeProps<StepFlowNode>) {
  return (
    <Box
      data-step={data.id}
      data-active={data.isActive}
      sx={{
        width: 200,
        bgcolor: 'background.paper',
        color: 'text.primary',
        border: 1,
        borderColor: selected ? 'text.primary' : 'paper.outline',
        outline: selected ? '1px solid currentColor' : 'none',
        fontSize: '0.75rem',
        lineHeight: 1.35,
      }}
    >
      {data.hasInput && <Handle type="target" position={Position.Left} className="step-port" />}
      <Box
        sx={{
          display: 'flex',
          gap: 1,
          px: 1,
          py: 0.5,
          borderBottom: 1,
          borderColor: 'divider',
          bgcolor: data.isActive ? 'text.primary' : undefined,
          color: data.isActive ? 'background.paper' : 'text.secondary',
        }}
      >
        <Box
          sx={{ flex: 1, minWidth: 0, overflow: 'hidden', textOverflow: 'ellipsis', whiteSpace: 'nowrap' }}
        >
          {data.kindTitle} · {data.id}
        </Box>
        {data.isActive && <Box sx={{ fontWeight: 700 }}>now</Box>}
      </Box>
      <Box sx={{ px: 1, py: 0.75 }}>
        <Box sx={{ fontWeight: 700, overflowWrap: 'anywhere' }}>{data.title}</Box>
        {data.summary.map((line) => (
          <Box key={line} sx={{ color: 'text.secondary', overflowWrap: 'anywhere' }}>
            {line}
          </Box>
        ))}
        {data.mark !== null && (
          <Box title={data.markText} sx={{ color: 'paper.warn', fontWeight: 700, mt: 0.5 }}>
            ▲ {marks[data.mark]}
          </Box>
        )}
      </Box>
      <Ports ports={data.ports} />
    </Box>
  );
});

function Ports({ ports }: { ports: readonly string[] }) {
  return (
    <Box sx={{ borderTop: ports.length > 0 ? 1 : 0, borderColor: 'divider' }}>
      {ports.map((port) => (
        <Box
          key={port}
          sx={{ position: 'relative', px: 1, py: 0.25, textAlign: 'right', color: 'text.secondary' }}
        >
          {port}
          <Handle id={port} type="source" position={Position.Right} className="step-port" />
        </Box>
      ))}
    </Box>
  );
}
