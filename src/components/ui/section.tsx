import { useId, type ReactNode } from 'react';

interface SectionProps {
  /** Citation mark (“§3”) and jump key. */
  number: number;
  title: string;
  /** Quiet words or links at the right end of the head. */
  aside?: ReactNode;
  children: ReactNode;
  className?: string;
}

/** A numbered section opened by an ink rule. Its id is `section-3`, its heading takes the focus when jumped to. */
export function Section({ number, title, aside, children, className = '' }: SectionProps) {
  const headingId = useId();
  return (
    <section
      id={`section-${number}`}
      aria-labelledby={headingId}
      className={`scroll-mt-4 border-t border-ink ${className}`}
    >
      <div className="flex flex-wrap items-baseline gap-x-3 gap-y-0.5 pt-2 pb-1.5">
        <span aria-hidden="true" className="w-2.5 font-mono text-caption text-ink3">
          {number}
        </span>
        <h2 id={headingId} tabIndex={-1} className="text-body font-semibold">
          {title}
        </h2>
        {aside !== undefined && <div className="ml-auto text-caption text-ink3">{aside}</div>}
      </div>
      {children}
    </section>
  );
}

/** Jumps to a numbered section and puts the focus on its heading. */
export function jumpToSection(number: number): void {
  const section = document.getElementById(`section-${number}`);
  section?.scrollIntoView();
  section?.querySelector('h2')?.focus({ preventScroll: true });
}
