/** Fields of forms: what the server rejects is shown at its field; numbers in the person's decimal style, ambiguous ones asked about. */
import { parseDecimal } from '@strainwright/common/quantities/decimal';
import { MenuItem, TextField, type TextFieldProps } from '@mui/material';
import { useState } from 'react';
import { Controller, type Control, type FieldPath, type FieldValues, type UseFormSetError } from 'react-hook-form';
import { ApiProblem } from '../api/client';
import { useDecimalStyle } from './measured';

interface BoundProps<T extends FieldValues> {
  control: Control<T>;
  name: FieldPath<T>;
  label: string;
  hint?: string;
}

type TextProps<T extends FieldValues> = BoundProps<T> & Pick<TextFieldProps, 'type' | 'multiline' | 'minRows' | 'autoComplete' | 'autoFocus' | 'required'>;

export function FormText<T extends FieldValues>({ control, name, label, hint, type, ...rest }: TextProps<T>) {
  return (
    <Controller control={control} name={name} render={({ field, fieldState }) => (
      <TextField {...rest} {...field} value={field.value ?? ''} onChange={(e) => field.onChange(type === 'date' && e.target.value === '' ? null : e.target.value)} type={type} label={label} error={fieldState.invalid} helperText={fieldState.error?.message ?? hint} slotProps={type === 'date' || type === 'datetime-local' ? { inputLabel: { shrink: true } } : undefined} />
    )} />
  );
}

export function FormSelect<T extends FieldValues>({ control, name, label, hint, options, multiple = false }: BoundProps<T> & { options: readonly { value: string; label: string }[]; multiple?: boolean }) {
  return (
    <Controller control={control} name={name} render={({ field, fieldState }) => (
      <TextField {...field} value={field.value ?? (multiple ? [] : '')} select label={label} error={fieldState.invalid} helperText={fieldState.error?.message ?? hint} slotProps={{ select: { multiple } }}>
        {options.map((o) => <MenuItem key={o.value} value={o.value}>{o.label}</MenuItem>)}
      </TextField>
    )} />
  );
}

const PROBLEMS = { empty: 'Enter a number', 'not a number': 'Not a number', ambiguous: 'Could be read two ways: leave out the thousands separator' } as const;

interface NumberProps {
  label: string;
  value: number | null;
  onChange: (value: number | null) => void;
  error?: string;
  hint?: string;
  disabled?: boolean;
  required?: boolean;
}

/** A number as text; tells null while it cannot be read. */
export function NumberField({ label, value, onChange, error, hint, ...rest }: NumberProps) {
  const style = useDecimalStyle();
  const shown = value === null ? '' : String(value).replace('.', style);
  const [text, setText] = useState<string | null>(null);
  const parsed = text === null || text === '' ? null : parseDecimal(text, style);
  const problem = parsed !== null && 'problem' in parsed ? PROBLEMS[parsed.problem] : undefined;
  const take = (typed: string) => {
    setText(typed);
    const read = parseDecimal(typed, style);
    onChange('value' in read ? read.value : null);
  };
  return (
    <TextField {...rest} label={label} value={text ?? shown} onChange={(e) => take(e.target.value)} onBlur={() => problem === undefined && setText(null)} error={problem !== undefined || error !== undefined} helperText={problem ?? error ?? hint}
      slotProps={{ htmlInput: { inputMode: 'decimal', className: 'mono', style: { textAlign: 'right' } } }} />
  );
}

export function FormNumber<T extends FieldValues>({ control, name, label, hint }: BoundProps<T>) {
  return <Controller control={control} name={name} render={({ field, fieldState }) => <NumberField label={label} value={field.value ?? null} onChange={field.onChange} error={fieldState.error?.message} hint={hint} />} />;
}

/** Puts what the server rejected at its fields. */
export function showAtFields<T extends FieldValues>(error: unknown, setError: UseFormSetError<T>, known: readonly FieldPath<T>[]): void {
  if (!(error instanceof ApiProblem)) return;
  for (const { path, message } of error.errors) {
    const field = known.find((name) => name === path || path.startsWith(`${name}.`));
    if (field !== undefined) setError(field, { message });
  }
}
