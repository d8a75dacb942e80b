import type { SettingName } from '../../../../shared/settings.ts';
import { Field } from '../../../components/ui/field.tsx';
import { Select, type Option } from '../../../components/ui/listbox.tsx';
import { Segments } from '../../../components/ui/segments.tsx';
import { isAssumed, SourceNote } from './source-note.tsx';
import type { SettingsForm } from './use-settings-form.ts';

interface ChoiceFieldProps {
  settings: SettingsForm;
  name: SettingName;
  label: string;
  options: readonly Option[];
  look: 'segments' | 'listbox';
}

/** A setting that is chosen, with its source. */
export function ChoiceField({ settings, name, label, options, look }: ChoiceFieldProps) {
  const held = settings.held(name);
  const value = typeof held.value === 'string' ? held.value : null;
  const choose = (next: string) => settings.put(name, next);
  const back = settings.readOnly ? null : () => settings.back(name);
  return (
    <Field
      label={label}
      assumed={isAssumed(held)}
      source={<SourceNote held={held} label={label} onBack={back} />}
    >
      {(ids) => (
        <span data-setting={name} className="block min-w-0">
          {look === 'segments' ? (
            <Segments
              {...ids}
              label={label}
              value={value}
              options={options}
              onChange={choose}
              disabled={settings.readOnly}
            />
          ) : (
            <Select
              {...ids}
              label={label}
              value={value ?? ''}
              options={options}
              onChange={choose}
              disabled={settings.readOnly}
            />
          )}
        </span>
      )}
    </Field>
  );
}
