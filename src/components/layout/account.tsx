import { useNavigate } from 'react-router-dom';
import { useSignOut } from '../../api/session.ts';
import { chooseTheme, useTheme, type Theme } from '../../lib/theme.ts';
import { useLab } from '../../lib/use-lab.ts';
import { Select } from '../ui/listbox.tsx';
import { openKeySheet } from './key-sheet-state.ts';

const THEMES: { value: Theme; label: string }[] = [
  { value: 'system', label: 'system' },
  { value: 'light', label: 'light' },
  { value: 'dark', label: 'dark' },
];

/** Who is signed in and in which role; theme, keys, sign out. */
export function Account() {
  const { session, lab } = useLab();
  const theme = useTheme();
  const signOut = useSignOut();
  const navigate = useNavigate();
  const leave = () =>
    signOut.mutate(undefined, { onSuccess: () => void navigate('/sign-in', { replace: true }) });
  return (
    <div className="text-table">
      <div className="font-semibold">{session.person.name}</div>
      <div className="text-caption text-ink2">{lab.role}</div>
      <div className="mt-2 flex flex-wrap items-center gap-x-1.5 text-caption text-ink2">
        Theme
        <Select
          look="inline"
          label="Theme"
          value={theme}
          options={THEMES}
          onChange={(value) => {
            const chosen = THEMES.find((option) => option.value === value);
            if (chosen !== undefined) chooseTheme(chosen.value);
          }}
          className="text-caption!"
        />
      </div>
      <button
        type="button"
        onClick={openKeySheet}
        className="mt-1 block min-h-7 text-ink2 hover:text-ink max-phone:min-h-10"
      >
        Keys
      </button>
      <button
        type="button"
        onClick={leave}
        disabled={signOut.isPending}
        className="block min-h-7 text-ink2 hover:text-ink max-phone:min-h-10"
      >
        {signOut.isPending ? 'Signing out…' : 'Sign out'}
      </button>
      {signOut.isError && (
        <p role="alert" className="text-caption text-bad">
          {signOut.error.message}
        </p>
      )}
    </div>
  );
}
