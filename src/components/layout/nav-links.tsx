import clsx from 'clsx';
import { NavLink } from 'react-router-dom';

const PLACES = [
  { to: '/captures', label: 'Captures' },
  { to: '/method', label: 'Method' },
] as const;

/** The screens. The current one has weight and, in the rail, a tick from the screen's edge. */
export function NavLinks({ onGo }: { onGo?: () => void }) {
  return (
    <ul className="grid">
      {PLACES.map(({ to, label }, index) => (
        <li
          key={to}
          className={clsx(index === 1 && 'mt-3 border-t border-rule pt-3 max-phone:mt-1 max-phone:pt-1')}
        >
          <NavLink
            to={to}
            onClick={onGo}
            className={({ isActive }) =>
              clsx(
                'relative flex min-h-[30px] items-center text-body transition-colors duration-[120ms] max-phone:min-h-11',
                isActive
                  ? 'font-semibold text-ink before:absolute before:top-1/2 before:-left-8 before:h-0.5 before:w-[22px] before:-translate-y-1/2 before:bg-est max-phone:before:-left-4 max-phone:before:w-2.5'
                  : 'text-ink2 hover:text-ink',
              )
            }
          >
            {label}
          </NavLink>
        </li>
      ))}
    </ul>
  );
}
