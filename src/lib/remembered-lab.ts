const KEY = 'perhertz.lab';

/** Id of the lab in which this person last worked on this computer; empty where none. */
export function rememberedLab(): string {
  try {
    return localStorage.getItem(KEY) ?? '';
  } catch {
    return '';
  }
}

export function rememberLab(id: string): void {
  try {
    localStorage.setItem(KEY, id);
  } catch {
    return;
  }
}
