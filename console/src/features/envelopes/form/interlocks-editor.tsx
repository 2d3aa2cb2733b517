import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import type { Interlock } from '@cresthold/shared';
import { interlockFields, interlockNumbers } from '../envelope-fields.js';
import { interlockTerms } from '../interlock-words.js';
import { useDraft, useDraftList } from './draft-context.js';
import { DraftField } from './draft-field.js';
import { textAt, type FormValue } from './draft-values.js';

const newInterlock: FormValue = {
  id: '',
  title: '',
  condition: '',
  delayS: 0,
  action: 'trip',
  protects: 'people',
  clearCondition: null,
  clearDelayS: 0,
  isLatching: false,
  bypassAtMostS: null,
  proofTestEveryDays: null,
  proofTestGraceDays: 7,
  message: '',
};

/** Every interlock: when it is unsafe, for how long, what is done, what is said. */
export function InterlocksEditor() {
  const { isReadOnly } = useDraft();
  const { rows, add, remove } = useDraftList('interlocks');
  return (
    <Box sx={{ display: 'grid', gap: 1.5 }}>
      {!isReadOnly && (
        <Box sx={{ fontSize: '0.75rem', color: 'text.secondary' }}>
          “Unsafe when” is an expression over the rig’s channels: true is the unsafe side. A reading that is
          not good counts as unsafe.
        </Box>
      )}
      {rows.length === 0 && <Box sx={{ color: 'text.secondary' }}>No interlocks.</Box>}
      <Box component="ol" sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 1.5 }}>
        {rows.map((row, index) => (
          <Box
            component="li"
            key={index}
            sx={{
              border: 1,
              borderColor: 'divider',
              p: 1.5,
              display: 'grid',
              gap: 1.5,
              gridTemplateColumns: 'minmax(0, 1fr)',
            }}
          >
            {isReadOnly ? (
              <ShownInterlock row={row} />
            ) : (
              <InterlockFields index={index} onRemove={() => remove(index)} />
            )}
          </Box>
        ))}
      </Box>
      {!isReadOnly && (
        <Box>
          <Button onClick={() => add(newInterlock)}>Add interlock</Button>
        </Box>
      )}
    </Box>
  );
}

function ShownInterlock({ row }: { row: FormValue }) {
  const text = (key: string) => textAt(row, [key]);
  return (
    <Box>
      <strong>{text('title')}</strong>{' '}
      <Box component="span" sx={{ color: 'text.secondary' }}>
        {text('id')}
      </Box>
      <div>
        {text('action')} when {text('condition')}
        {text('delayS') !== '0' && ` for ${text('delayS')} s`}
      </div>
      <Box component="ul" sx={{ m: 0, pl: 2, fontSize: '0.8125rem' }}>
        {interlockTerms(row as Interlock).map((term) => (
          <li key={term}>{term}</li>
        ))}
      </Box>
      <Box sx={{ color: 'text.secondary', fontSize: '0.8125rem' }}>{text('message')}</Box>
    </Box>
  );
}

const widths: Record<string, string> = {
  title: 'span 2',
  id: 'span 2',
  condition: 'span 2',
  clearCondition: 'span 3',
  isLatching: 'span 2',
  bypassAtMostS: 'span 2',
  proofTestEveryDays: 'span 2',
  proofTestGraceDays: 'span 2',
  message: 'span 7',
};

function InterlockFields({ index, onRemove }: { index: number; onRemove: () => void }) {
  return (
    <Box
      sx={{
        display: 'grid',
        gap: 1.5,
        alignItems: 'start',
        gridTemplateColumns: { xs: 'minmax(0, 1fr)', md: 'repeat(8, minmax(0, 1fr))' },
      }}
    >
      {interlockFields.map(({ key, ...field }) => (
        <Box key={key} sx={{ gridColumn: { md: widths[key] } }}>
          <DraftField
            path={['interlocks', index, key]}
            isLabelShown
            isNumber={interlockNumbers.has(key)}
            {...field}
          />
        </Box>
      ))}
      <Button sx={{ minHeight: 40 }} onClick={onRemove} aria-label={`Remove interlock ${index + 1}`}>
        Remove
      </Button>
    </Box>
  );
}
