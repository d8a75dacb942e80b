import { Account } from './account.tsx';
import { LabName } from './lab-name.tsx';
import { NavLinks } from './nav-links.tsx';

/** The text rail at the left; hidden on phones, where the bar stands in for it. */
export function Rail() {
  return (
    <header className="sticky top-0 flex h-screen flex-col overflow-y-auto pt-7 pr-5 pb-8 pl-8 max-phone:hidden print:hidden">
      <div>
        <div className="border-b border-ink pb-1 text-[17px] leading-6 font-semibold">Perhertz</div>
        <div className="pt-1">
          <LabName />
        </div>
      </div>
      <nav aria-label="Screens" className="mt-7">
        <NavLinks />
      </nav>
      <div className="mt-auto pt-8">
        <Account />
      </div>
    </header>
  );
}
