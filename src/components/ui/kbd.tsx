/** A key in a box; decoration beside the words of a control, so readers skip it. */
export function Kbd({ children }: { children: string }) {
  return (
    <span
      aria-hidden="true"
      className="inline-grid min-w-[15px] place-items-center rounded-xs border border-current px-[3px] font-mono text-[10px] leading-[13px] font-normal opacity-80"
    >
      {children}
    </span>
  );
}
