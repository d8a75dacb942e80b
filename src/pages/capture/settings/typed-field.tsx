import type { ReactNode } from 'react';
import { useWatch } from 'react-hook-form';
import { Field, TextInput, type FieldIds } from '../../../components/ui/field.tsx';
import { quantityOf, type TypedName } from './fields.ts';
import { quantityText } from './quantity-text.ts';
import { isAssumed, SourceNote } from './source-note.tsx';
import type { SettingsForm } from './use-settings-form.ts';

interface InputProps extends Partial<FieldIds> {
  settings: SettingsForm;
  name: TypedName;
  /** Accessible name where no label points at the field. */
  label?: string;
  /** Hides the unit, where the label says it. */
  bare?: boolean;
}

function QuantityInput({ settings, name, label, bare = false, ...ids }: InputProps) {
  const { form, held, commit, restore, readOnly } = settings;
  const text = useWatch({ control: form.control, name });
  const { value } = held(name);
  const { unit } = quantityText(typeof value === 'number' ? value : null, quantityOf(name));
  const { onBlur, ...registered } = form.register(name);
  const shown = /[a-zµΩ%]/i.test(text) || unit === '' || bare ? '' : unit;
  return (
    <TextInput
      {...ids}
      {...registered}
      mono
      aria-label={label}
      data-setting={name}
      unit={shown}
      className={shown === '' ? 'pr-2.5!' : shown.length < 4 ? 'pr-9!' : 'pr-16!'}
      readOnly={readOnly}
      autoComplete="off"
      spellCheck={false}
      enterKeyHint="done"
      onBlur={(event) => {
        void onBlur(event);
        void commit(name);
      }}
      onKeyDown={(event) => {
        if (event.key === 'Enter') {
          event.preventDefault();
          void commit(name);
        }
        if (event.key === 'Escape') {
          event.preventDefault();
          restore(name);
        }
      }}
    />
  );
}

interface TypedFieldProps {
  settings: SettingsForm;
  name: TypedName;
  label: ReactNode;
  /** The label in words. */
  words: string;
  /** The setting that holds its standard uncertainty, in a field of its own beside it. */
  uncertainty?: TypedName;
  /** Without it the density or its uncertainty is less than it could be. */
  wanted?: boolean;
}

/** A typed setting with its source, and its standard uncertainty where it has one. */
export function TypedField({ settings, name, label, words, uncertainty, wanted = false }: TypedFieldProps) {
  const held = settings.held(name);
  const heldU = uncertainty === undefined ? null : settings.held(uncertainty);
  const { errors } = settings.form.formState;
  const error =
    errors[name]?.message ?? (uncertainty === undefined ? undefined : errors[uncertainty]?.message);
  const back = () => {
    settings.restore(name);
    settings.back(name);
  };
  const assumed = isAssumed(held) && (wanted || held.origin !== null);
  return (
    <Field
      label={label}
      error={error}
      assumed={assumed}
      source={<SourceNote held={held} label={words} onBack={settings.readOnly ? null : back} />}
    >
      {(ids) =>
        uncertainty === undefined || heldU === null ? (
          <QuantityInput settings={settings} name={name} {...ids} />
        ) : (
          <span className="grid grid-cols-[minmax(0,1.1fr)_minmax(0,1fr)] gap-1.5">
            <QuantityInput
              settings={settings}
              name={name}
              {...ids}
              aria-invalid={errors[name] === undefined ? undefined : true}
              bare={name === 'ownNoiseDbmPerHz'}
            />
            <span className="relative block [&_input]:pl-6">
              <span
                aria-hidden="true"
                className="absolute inset-y-0 left-2.5 z-[1] flex items-center text-caption text-ink3"
              >
                u
              </span>
              <QuantityInput
                settings={settings}
                name={uncertainty}
                label={`${words}, standard uncertainty`}
                aria-describedby={ids['aria-describedby']}
                aria-invalid={errors[uncertainty] === undefined ? undefined : true}
                bare
              />
            </span>
          </span>
        )
      }
    </Field>
  );
}
