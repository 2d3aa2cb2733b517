import { useMemo, useState, type ChangeEvent } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import TextField from '@mui/material/TextField';
import {
  channelRowsMax,
  mergeRows,
  readChannelTable,
  type ChannelRow,
  type ReadTable,
  type TableSetting,
} from '@cresthold/shared';
import { Notice } from '../../../components/index.js';

interface ImportDialogProps {
  setting: TableSetting;
  rows: readonly ChannelRow[];
  /** What is read at first, e.g. from the clipboard. */
  initialText: string;
  onRows: (rows: ChannelRow[]) => void;
  onClose: () => void;
}

/** Reads a register map from a file or from what is pasted; says by line and column what is wrong with it. */
export function ImportDialog({ setting, rows, initialText, onRows, onClose }: ImportDialogProps) {
  const [text, setText] = useState(initialText);
  const read = useMemo(() => (text.trim() === '' ? null : readChannelTable(text, setting)), [text, setting]);
  const merged = read ? mergeRows(rows, read.rows) : [];
  const take = (taken: ChannelRow[]) => {
    onRows(taken);
    onClose();
  };
  const isUsable = read !== null && read.rows.length > 0;
  return (
    <Dialog open onClose={onClose} aria-labelledby="import-title" maxWidth="md" fullWidth>
      <DialogTitle id="import-title" variant="h3">
        Import a register map
      </DialogTitle>
      <DialogContent sx={{ display: 'grid', gap: 1.5, gridTemplateColumns: 'minmax(0, 1fr)' }}>
        <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary' }}>
          Comma, semicolon or tab separated, column names in the first line; <code>id</code> must be among
          them. An export of this table shows all names. Nothing is saved yet.
        </Box>
        <FileChoice onText={setText} />
        <TextField
          label="Or paste it here"
          multiline
          minRows={5}
          maxRows={12}
          value={text}
          onChange={(event) => setText(event.target.value)}
          slotProps={{ htmlInput: { spellCheck: false, style: { whiteSpace: 'pre', overflowX: 'auto' } } }}
        />
        {read && <Reading read={read} />}
      </DialogContent>
      <DialogActions sx={{ flexWrap: 'wrap', gap: 1 }}>
        <Button onClick={onClose}>Cancel</Button>
        <Button disabled={!isUsable || merged.length > channelRowsMax} onClick={() => take(merged)}>
          Add, and replace rows of the same id
        </Button>
        <Button
          variant="contained"
          disabled={!isUsable || read.rows.length > channelRowsMax}
          onClick={() => take(read?.rows ?? [])}
        >
          Replace all channels
        </Button>
      </DialogActions>
    </Dialog>
  );
}

function FileChoice({ onText }: { onText: (text: string) => void }) {
  const load = async (event: ChangeEvent<HTMLInputElement>) => {
    const file = event.target.files?.[0];
    if (file) onText(await file.text());
  };
  return (
    <Box component="label" sx={{ display: 'grid', gap: 0.5, fontSize: '0.8125rem' }}>
      File
      <input type="file" accept=".csv,.tsv,.txt,text/csv" onChange={(event) => void load(event)} />
    </Box>
  );
}

function Reading({ read }: { read: ReadTable }) {
  const count = read.rows.length === 1 ? 'One channel' : `${read.rows.length} channels`;
  if (read.faults.length === 0)
    return <Notice kind="plain" role="status" title={`${count} read, none at fault`} />;
  return (
    <Notice
      kind="warn"
      role="status"
      title={`${count} read, with ${read.faults.length === 1 ? 'one fault' : `${read.faults.length} faults`}`}
    >
      {read.rows.length > 0 && 'They can be taken as they are and mended in the table.'}
      <Box component="ul" sx={{ m: 0, pl: 2.5, maxHeight: '10rem', overflowY: 'auto' }} tabIndex={0}>
        {read.faults.map(({ line, column, message }) => (
          <li key={`${line}:${column}:${message}`}>
            Line {line}
            {column !== '' && (
              <>
                , <code>{column}</code>
              </>
            )}
            : {message}
          </li>
        ))}
      </Box>
    </Notice>
  );
}
