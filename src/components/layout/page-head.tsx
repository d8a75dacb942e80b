import type { ReactNode } from 'react';

interface PageHeadProps {
  title: ReactNode;
  /** Name of the page in the browser's tab, where it differs from the title. */
  documentTitle?: string;
  /** Trail over the title. */
  above?: ReactNode;
  /** Line under the title. */
  below?: ReactNode;
  /** Buttons and quiet words at the right. */
  actions?: ReactNode;
}

/** A page's h1 with what stands around it. */
export function PageHead({ title, documentTitle, above, below, actions }: PageHeadProps) {
  const name = documentTitle ?? (typeof title === 'string' ? title : 'Perhertz');
  return (
    <header className="flex flex-wrap items-end gap-x-4 gap-y-2.5">
      <title>{`${name} · Perhertz`}</title>
      <div className="min-w-0 flex-1 basis-[320px]">
        {above !== undefined && <div className="mb-1 text-caption text-ink2">{above}</div>}
        <h1 className="text-title font-semibold break-words">{title}</h1>
        {below !== undefined && <div className="mt-1 text-table text-ink2">{below}</div>}
      </div>
      {actions !== undefined && <div className="flex flex-wrap items-center gap-2.5">{actions}</div>}
    </header>
  );
}
