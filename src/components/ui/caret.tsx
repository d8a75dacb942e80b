/** The small angle that says: this opens. */
export function Caret({ open = false }: { open?: boolean }) {
  return (
    <svg aria-hidden="true" width="9" height="6" viewBox="0 0 9 6" className="shrink-0">
      <path
        d={open ? 'M1 5 4.5 1.5 8 5' : 'M1 1l3.5 3.5L8 1'}
        fill="none"
        stroke="currentColor"
        strokeWidth="1.3"
      />
    </svg>
  );
}
