import clsx from 'clsx';
import { useId, type ComponentProps, type ReactNode } from 'react';

export interface FieldIds {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

interface FieldProps {
  label: ReactNode;
  /** Where the value came from, such as `file, line 6`. */
  source?: ReactNode;
  /** An assumed source is written in ochre. */
  assumed?: boolean;
  /** One sentence with a way out; takes the place of the source. */
  error?: ReactNode;
  /** `row`: label, control, source in one line. `stack`: label over control over message. */
  layout?: 'row' | 'stack';
  /** Renders the control with the ids that tie it to label and message. */
  children: (ids: FieldIds) => ReactNode;
}

/** Label, control and source or error. */
export function Field({ label, source, assumed = false, error, layout = 'row', children }: FieldProps) {
  const id = useId();
  const noteId = `${id}-note`;
  const note = error ?? source;
  const control = children({
    id,
    'aria-describedby': note === undefined ? undefined : noteId,
    'aria-invalid': error === undefined ? undefined : true,
  });
  const tone = error !== undefined ? 'text-bad' : assumed ? 'text-warn' : 'text-ink3';
  const noteLine = note !== undefined && (
    <div
      id={noteId}
      role={error === undefined ? undefined : 'alert'}
      className={clsx(tone, layout === 'row' ? 'text-caption' : 'text-table')}
    >
      {note}
    </div>
  );
  if (layout === 'stack') {
    return (
      <div className="grid gap-1">
        <label htmlFor={id} className="text-table text-ink2">
          {label}
        </label>
        {control}
        {noteLine}
      </div>
    );
  }
  return (
    <div className="grid grid-cols-[110px_minmax(0,174px)_minmax(0,1fr)] items-center gap-x-2.5 border-b border-rule2 py-1 max-phone:grid-cols-[110px_minmax(0,1fr)]">
      <label htmlFor={id} className="text-body text-ink">
        {label}
      </label>
      {control}
      <div className="max-phone:col-start-2">{noteLine}</div>
    </div>
  );
}

interface TextInputProps extends ComponentProps<'input'> {
  /** Unit shown inside the field at its right edge. */
  unit?: string;
  mono?: boolean;
}

/** A text field; measured values are in mono with their unit inside. */
export function TextInput({ unit, mono = false, className, ...rest }: TextInputProps) {
  const input = (
    <input
      className={clsx('field', mono && 'font-mono', unit !== undefined && 'pr-12', className)}
      {...rest}
    />
  );
  if (unit === undefined) return input;
  return (
    <span className="relative block">
      {input}
      <span
        aria-hidden="true"
        className="pointer-events-none absolute inset-y-0 right-2.5 flex items-center text-caption text-ink3"
      >
        {unit}
      </span>
    </span>
  );
}
