import { useState, type SubmitEvent } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import Dialog from '@mui/material/Dialog';
import DialogActions from '@mui/material/DialogActions';
import DialogContent from '@mui/material/DialogContent';
import DialogTitle from '@mui/material/DialogTitle';
import type { Channel, Rig } from '@cresthold/shared';
import { asProblem } from '../../api/index.js';
import { Notice, ProblemNotice } from '../../components/index.js';
import { usePutInForce } from './api/calibrations.js';
import {
  checkCalibration,
  draftKeyOf,
  emptyCalibration,
  readConversion,
  type DraftKey,
} from './calibration-draft.js';
import { CertificateChoice } from './certificate-choice.js';
import { ConversionFields, RecordFields } from './conversion-fields.js';
import { ConversionPreview } from './conversion-preview.js';

interface CalibrationDialogProps {
  rig: Rig;
  channel: Channel;
  onClose: () => void;
}

const today = () => new Date().toISOString().slice(0, 10);

/** Enters a calibration of one sensor, shows what it makes of raw values, and puts it in force. */
export function CalibrationDialog({ rig, channel, onClose }: CalibrationDialogProps) {
  const [draft, setDraft] = useState(() => emptyCalibration(today()));
  const [certificate, setCertificate] = useState<File | null>(null);
  const [isTried, setTried] = useState(false);
  const put = usePutInForce(rig.id);
  const checked = checkCalibration(draft);
  const conversion = readConversion(draft);
  const problem = put.error ? asProblem(put.error) : null;
  const faultAt = (key: DraftKey) =>
    (isTried ? checked.faults?.get(key) : undefined) ??
    problem?.fields.find(({ field }) => draftKeyOf(field) === key)?.message;
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (checked.content === null) return;
    put.mutate({ channel: channel.id, content: checked.content, certificate }, { onSuccess: onClose });
  };
  const set = (key: DraftKey, value: string) => setDraft((before) => ({ ...before, [key]: value }));
  const fields = { rig, channel: channel.id, draft, faultAt, set };
  return (
    <Dialog open onClose={onClose} aria-labelledby="calibration-title" maxWidth="md" fullWidth>
      <form onSubmit={submit} noValidate>
        <DialogTitle id="calibration-title" variant="h3">
          Calibrate {channel.title}
        </DialogTitle>
        <DialogContent sx={{ display: 'grid', gap: 2, gridTemplateColumns: 'minmax(0, 1fr)' }}>
          <Box sx={grid}>
            <ConversionFields {...fields} />
          </Box>
          {conversion ? (
            <ConversionPreview conversion={conversion} channel={channel} />
          ) : (
            <Box sx={{ color: 'text.secondary', fontSize: '0.8125rem' }}>
              The curve is drawn as soon as the conversion is complete.
            </Box>
          )}
          <Box sx={grid}>
            <RecordFields {...fields} />
          </Box>
          <CertificateChoice
            label="Certificate file (PDF, PNG or JPEG, 5 MB at most)"
            onFile={setCertificate}
          />
          <Notice
            kind="act"
            title="Putting it in force withdraws the envelope in force, where it converts otherwise"
          >
            Limits and interlocks were approved for other values: a safety officer looks at them again before
            the rig can be armed.
          </Notice>
          {problem && <ProblemNotice title="The calibration was not put in force" error={problem} />}
        </DialogContent>
        <DialogActions>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" variant="contained" disabled={put.isPending}>
            Put in force
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}

const grid = {
  display: 'grid',
  gap: 2,
  pt: 0.75,
  gridTemplateColumns: 'repeat(auto-fill, minmax(min(100%, 15rem), 1fr))',
  alignItems: 'start',
};
