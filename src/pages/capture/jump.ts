import type { SettingName } from '../../../shared/settings.ts';

/** Puts the focus on the field of a setting and brings it into view. */
export function jumpToSetting(name: SettingName): void {
  const holder = document.querySelector(`[data-setting="${name}"]`);
  const control =
    holder instanceof HTMLInputElement
      ? holder
      : (holder?.querySelector('[role="radio"][aria-checked="true"]') ?? holder?.querySelector('button'));
  if (!(control instanceof HTMLElement)) return;
  control.scrollIntoView({ block: 'center' });
  control.focus({ preventScroll: true });
  if (control instanceof HTMLInputElement) control.select();
}
