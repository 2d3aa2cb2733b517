import type { ChangeEvent } from 'react';
import Box from '@mui/material/Box';

interface CertificateChoiceProps {
  label: string;
  onFile: (file: File | null) => void;
}

/** Chooses the file of a certificate. */
export function CertificateChoice({ label, onFile }: CertificateChoiceProps) {
  const choose = ({ target }: ChangeEvent<HTMLInputElement>) => onFile(target.files?.[0] ?? null);
  return (
    <Box component="label" sx={{ display: 'grid', gap: 0.5, fontSize: '0.8125rem', minWidth: 0 }}>
      {label}
      <input
        type="file"
        accept="application/pdf,image/png,image/jpeg"
        onChange={choose}
        style={{ maxWidth: '100%' }}
      />
    </Box>
  );
}
