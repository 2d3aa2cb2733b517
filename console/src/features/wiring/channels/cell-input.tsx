import { useId, useState } from 'react';
import type { ChannelColumn } from '@cresthold/shared';

interface CellInputProps {
  column: ChannelColumn;
  /** Names the cell, e.g. "Register of Oxygen". */
  label: string;
  text: string;
  /** Choices besides those of the column, e.g. the rig's connections. */
  options?: readonly { value: string; label: string }[] | undefined;
  fault: string | undefined;
  /** Where the cell is, for moving about by keyboard and for pasting. */
  place: { row: number; column: number };
  onChange: (text: string) => void;
}

/** One cell that is typed or chosen; native and light, because a table has thousands of them. */
export function CellInput({ column, label, text, options, fault, place, onChange }: CellInputProps) {
  const faultId = useId();
  const shared = {
    'aria-label': label,
    'aria-invalid': fault !== undefined,
    'aria-describedby': fault === undefined ? undefined : faultId,
    'data-row': place.row,
    'data-column': place.column,
  };
  const choices = options ?? choicesOf(column);
  return (
    <>
      {choices ? (
        <select {...shared} value={text} onChange={(event) => onChange(event.target.value)}>
          {!choices.some(({ value }) => value === text) && <option value={text}>{text}</option>}
          {choices.map(({ value, label: shown }) => (
            <option key={value} value={value}>
              {shown}
            </option>
          ))}
        </select>
      ) : (
        <TextCell shared={shared} column={column} text={text} onChange={onChange} />
      )}
      {fault !== undefined && (
        <div id={faultId} className="cell-fault">
          {fault}
        </div>
      )}
    </>
  );
}

interface TextCellProps extends Pick<CellInputProps, 'column' | 'text' | 'onChange'> {
  shared: object;
}

function TextCell({ shared, column, text, onChange }: TextCellProps) {
  const [isFocused, setFocused] = useState(false);
  const isNumber = column.kind === 'number' || column.kind === 'integer';
  return (
    <input
      {...shared}
      value={text}
      title={isFocused ? undefined : text}
      className={isNumber ? 'cell-number' : undefined}
      inputMode={isNumber ? 'decimal' : undefined}
      placeholder={column.fallback ?? undefined}
      autoComplete="off"
      spellCheck={false}
      onFocus={() => setFocused(true)}
      onBlur={() => setFocused(false)}
      onChange={(event) => onChange(event.target.value)}
    />
  );
}

function choicesOf({ kind, options, fallback, isRequired }: ChannelColumn) {
  const given = kind === 'boolean' ? [true, false] : kind === 'choice' ? options : null;
  if (!given) return null;
  const words = given.map((option) => ({ value: String(option), label: String(option) }));
  const empty = { value: '', label: fallback === null ? '' : `${fallback} (default)` };
  return isRequired ? words : [empty, ...words];
}
