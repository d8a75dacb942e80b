import { useNavigate } from 'react-router-dom';
import { useLab } from '../../lib/use-lab.ts';
import { Caret } from '../ui/caret.tsx';
import { Menu } from '../ui/menu.tsx';

/** The lab's name; a menu where the person belongs to several. */
export function LabName() {
  const { session, lab, switchLab } = useLab();
  const navigate = useNavigate();
  if (session.labs.length < 2) return <span className="text-caption text-ink2">{lab.name}</span>;
  return (
    <Menu
      align="start"
      heading="Work in"
      trigger={
        <button
          type="button"
          className="flex min-h-6 items-center gap-1.5 text-left text-caption text-ink2 hover:text-ink"
        >
          {lab.name} <Caret />
          <span className="sr-only">, change the lab</span>
        </button>
      }
      items={session.labs.map(({ id, name, role }) => ({
        label: name,
        note: role,
        current: id === lab.id,
        onSelect: () => {
          if (id === lab.id) return;
          switchLab(id);
          void navigate('/captures');
        },
      }))}
    />
  );
}
