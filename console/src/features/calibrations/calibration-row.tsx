import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import Link from '@mui/material/Link';
import type { CalibrationDocument } from '../../api/index.js';
import { formatMoment, ProblemNotice, ReasonDialog } from '../../components/index.js';
import { certificateAddress, useUpload, useWithdraw } from './api/calibrations.js';
import { CertificateChoice } from './certificate-choice.js';
import { conversionText } from './conversion-text.js';
import { DueMark } from './due-mark.js';

interface CalibrationRowProps {
  title: string;
  calibration: CalibrationDocument;
  /** The ones before it, newest first. */
  history: readonly CalibrationDocument[];
  /** Why it cannot be changed, in words; null where it can. */
  obstacle: string | null;
  onCalibrate: () => void;
}

/** The calibration that holds for a sensor, what came before, and what can be done about it. */
export function CalibrationRow({ title, calibration, history, obstacle, onCalibrate }: CalibrationRowProps) {
  const [isWithdrawing, setWithdrawing] = useState(false);
  const withdraw = useWithdraw(calibration.rigId);
  return (
    <Box component="li" sx={{ py: 1, borderTop: 1, borderColor: 'divider', display: 'grid', gap: 0.5 }}>
      <Box sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2, justifyContent: 'space-between' }}>
        <strong>{title}</strong>
        <DueMark calibration={calibration} />
      </Box>
      <Facts calibration={calibration} />
      <Certificate calibration={calibration} obstacle={obstacle} />
      {obstacle === null ? (
        <Box sx={{ display: 'flex', gap: 1, flexWrap: 'wrap' }}>
          <Button aria-label={`Calibrate ${title} anew`} onClick={onCalibrate}>
            Calibrate anew …
          </Button>
          <Button aria-label={`Withdraw the calibration of ${title}`} onClick={() => setWithdrawing(true)}>
            Withdraw …
          </Button>
        </Box>
      ) : (
        <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>{obstacle}</Box>
      )}
      {history.length > 0 && <History list={history} />}
      {isWithdrawing && (
        <ReasonDialog
          title={`Withdraw the calibration of ${title}`}
          confirmLabel="Withdraw"
          error={withdraw.error}
          isBusy={withdraw.isPending}
          onClose={() => setWithdrawing(false)}
          onConfirm={(reason) =>
            withdraw.mutate({ id: calibration.id, reason }, { onSuccess: () => setWithdrawing(false) })
          }
        >
          The sensor is then taken as its adapter gives it, and the envelope in force is withdrawn.
        </ReasonDialog>
      )}
    </Box>
  );
}

function Facts({ calibration }: { calibration: CalibrationDocument }) {
  const { content, version, author, createdAt } = calibration;
  const uncertainty =
    content.expandedUncertainty === null ? '' : `, ± ${content.expandedUncertainty} (k = 2)`;
  return (
    <Box sx={{ fontSize: '0.8125rem', color: 'text.secondary', overflowWrap: 'anywhere' }}>
      Version {version}: {conversionText(content.conversion)}
      {uncertainty}; calibrated on {content.calibratedOn}, entered by {author} {formatMoment(createdAt)}
      {content.note !== '' && `; ${content.note}`}
    </Box>
  );
}

function Certificate({ calibration, obstacle }: Pick<CalibrationRowProps, 'calibration' | 'obstacle'>) {
  const upload = useUpload(calibration.rigId);
  const { id, certificateFile, content } = calibration;
  return (
    <Box sx={{ fontSize: '0.8125rem', display: 'grid', gap: 0.5 }}>
      <span>
        {content.certificate === '' ? 'Certificate not named' : `Certificate ${content.certificate}`}
        {certificateFile && (
          <>
            {' · '}
            <Link href={certificateAddress(id)} download>
              Download ({Math.ceil(certificateFile.bytes / 1024)} kB)
            </Link>
          </>
        )}
      </span>
      {certificateFile === null && obstacle === null && (
        <CertificateChoice
          label="Upload its file, once (PDF, PNG or JPEG, 5 MB at most)"
          onFile={(file) => file && upload.mutate({ id, file })}
        />
      )}
      {upload.error !== null && <ProblemNotice title="The certificate was not taken" error={upload.error} />}
    </Box>
  );
}

function History({ list }: { list: readonly CalibrationDocument[] }) {
  return (
    <Box component="details" sx={{ fontSize: '0.8125rem' }}>
      <summary>History ({list.length})</summary>
      <Box component="ul" sx={{ m: 0, pl: 2.5 }}>
        {list.map(({ id, version, status, content, endedAt, certificateFile }) => (
          <li key={id}>
            Version {version}, {status}
            {endedAt !== null && ` ${formatMoment(endedAt)}`}: {conversionText(content.conversion)}
            {certificateFile && (
              <>
                {' · '}
                <Link href={certificateAddress(id)} download>
                  certificate
                </Link>
              </>
            )}
          </li>
        ))}
      </Box>
    </Box>
  );
}
