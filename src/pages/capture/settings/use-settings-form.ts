import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import type { SettingName } from '../../../../shared/settings.ts';
import type { SectionProps } from '../contract.ts';
import { quantityOf, SettingsTexts, TYPED_NAMES, type TypedName } from './fields.ts';
import { heldSetting, type Held } from './held.ts';
import { parseQuantity, quantityText } from './quantity-text.ts';

const numeric = ({ value }: Held) => (typeof value === 'number' ? value : null);

const textOf = (name: TypedName, held: Held) => quantityText(numeric(held), quantityOf(name));

/** The settings as a form: what each holds, and what writes it into the draft. */
export function useSettingsForm(props: SectionProps) {
  const held = (name: SettingName) => heldSetting(name, props);
  const texts = SettingsTexts.parse(
    Object.fromEntries(TYPED_NAMES.map((name) => [name, textOf(name, held(name)).text])),
  );
  const form = useForm<SettingsTexts>({
    resolver: zodResolver(SettingsTexts),
    mode: 'onTouched',
    values: texts,
    resetOptions: { keepDirtyValues: true, keepErrors: true },
  });

  const put = (name: SettingName, value: string | number | null) =>
    props.draft.setSettings({ [name]: value });

  /** Takes what stands in a typed field into the draft, where it can be read. */
  const commit = async (name: TypedName) => {
    if (!form.getFieldState(name).isDirty || !(await form.trigger(name))) return;
    const text = form.getValues(name);
    const before = held(name);
    if (text.trim() === '') {
      form.resetField(name, {
        defaultValue: before.inFile === null ? '' : textOf(name, { ...before, value: before.inFile }).text,
      });
      put(name, null);
      return;
    }
    const quantity = quantityOf(name);
    const parsed = parseQuantity(text, quantity, textOf(name, before).factor);
    if (!parsed.ok) return;
    form.resetField(name, { defaultValue: quantityText(parsed.value, quantity).text });
    put(name, parsed.value);
  };

  /** Puts a typed field back to what holds. */
  const restore = (name: TypedName) => form.resetField(name, { defaultValue: textOf(name, held(name)).text });

  const back = (name: SettingName) => put(name, null);

  return { form, held, put, commit, restore, back, readOnly: props.readOnly };
}

export type SettingsForm = ReturnType<typeof useSettingsForm>;
