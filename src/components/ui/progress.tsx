import clsx from 'clsx';

interface ProgressProps {
  /** 0 to 1; null: how far isn't known. */
  share: number | null;
  /** What is going on, for readers. */
  label: string;
  /** Ochre: it waits for a person. */
  waiting?: boolean;
}

/** A 3 px bar. */
export function Progress({ share, label, waiting = false }: ProgressProps) {
  const percent = share === null ? undefined : Math.round(Math.min(1, Math.max(0, share)) * 100);
  return (
    <div
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={100}
      aria-valuenow={percent}
      className="h-[3px] w-full bg-rule"
    >
      <div
        className={clsx('h-full transition-[width] duration-[120ms]', waiting ? 'bg-warn-g' : 'bg-est')}
        style={{
          width: share === null ? '100%' : `${(share * 100).toFixed(2)}%`,
          opacity: share === null ? 0.4 : 1,
        }}
      />
    </div>
  );
}
