import { useState } from 'react';
import { useLab } from '../../lib/use-lab.ts';
import { Account } from './account.tsx';
import { LabName } from './lab-name.tsx';
import { NavLinks } from './nav-links.tsx';

/** On phones: name, lab and a menu that opens under the bar. */
export function PhoneBar() {
  const { session, lab } = useLab();
  const [open, setOpen] = useState(false);
  const several = session.labs.length > 1;
  return (
    <header className="border-b border-rule px-4 phone:hidden print:hidden">
      <div className="flex min-h-12 items-center gap-2.5">
        <span className="text-[15px] font-semibold">Perhertz</span>
        <span aria-hidden="true" className="h-4 border-l border-ink" />
        <span className="truncate text-table text-ink2">{several ? <LabName /> : lab.name}</span>
        <button
          type="button"
          aria-expanded={open}
          aria-controls="phone-menu"
          onClick={() => setOpen(!open)}
          className="ml-auto min-h-10 min-w-10 text-table font-medium text-est"
        >
          {open ? 'Close' : 'Menu'}
        </button>
      </div>
      {open && (
        <div id="phone-menu" className="grid gap-3 border-t border-rule pt-2 pb-4">
          <nav aria-label="Screens">
            <NavLinks onGo={() => setOpen(false)} />
          </nav>
          <div className="border-t border-rule pt-3">
            <Account />
          </div>
        </div>
      )}
    </header>
  );
}
