import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { Capture } from '../../../shared/capture.ts';
import { useEstimate } from '../../api/estimates.ts';
import { useKeyList } from '../../components/layout/key-sheet-state.ts';
import { ErrorState } from '../../components/ui/states.tsx';
import { useMedia } from '../../lib/use-media.ts';
import { Announcer } from './announcer.tsx';
import { CaptureHeader } from './capture-header.tsx';
import { CAPTURE_KEYS, useCaptureKeys } from './capture-keys.ts';
import type { Highlight, SectionProps } from './contract.ts';
import { Dock } from './dock.tsx';
import { shownIdOf, withShown } from './draft-address.ts';
import { FindingsSection } from './findings-section.tsx';
import { HeaderActions, KeepButton } from './header-actions.tsx';
import { KeptNote } from './kept-note.tsx';
import { MissingQuestion } from './missing-question.tsx';
import { AveragingSection } from './result/averaging-section.tsx';
import { EstimatesSection } from './result/estimates-section.tsx';
import { LedgerSection } from './result/ledger-section.tsx';
import { SpursSection } from './result/spurs-section.tsx';
import { SettingsSection } from './settings/settings-section.tsx';
import { TraceSection } from './trace/trace-section.tsx';
import { useDraft } from './use-draft.ts';
import { useKeep } from './use-keep.ts';
import { useShownEstimate } from './use-shown-estimate.ts';

/** A capture that could be read, with everything that can be done to it. */
export function Workbench({ capture }: { capture: Capture }) {
  const [params, setParams] = useSearchParams();
  const latest = useEstimate(capture.estimate?.id ?? null);
  const draft = useDraft(capture, latest.data ?? null);
  const shownId = shownIdOf(params, capture);
  const shown = useShownEstimate(capture, latest, draft, shownId);
  const keeping = useKeep(capture, draft);
  const [highlight, setHighlight] = useState<Highlight>(null);
  const [spurHz, setSpurHz] = useState<number | null>(null);
  const readOnly = shownId !== null || !capture.may.estimate;
  const changed = draft.changed && !readOnly && latest.data !== undefined;
  const show = (id: string | null) =>
    setParams((before) => withShown(before, capture, id), { preventScrollReset: true });
  useKeyList('Capture', CAPTURE_KEYS);
  useCaptureKeys(draft, readOnly, shownId === null ? null : () => show(null));

  const section: SectionProps = {
    capture,
    estimate: shown.estimate,
    draft,
    readOnly,
    pending: shown.pending,
  };
  const keepButton = (
    <KeepButton capture={capture} keeping={keeping} disabled={shown.pending || shown.error !== null} />
  );
  return (
    <>
      <CaptureHeader
        capture={capture}
        actions={
          <HeaderActions
            capture={capture}
            shown={shown.estimate}
            changed={changed}
            pending={shown.pending}
            onLatest={shownId === null ? null : () => show(null)}
            keepButton={changed ? keepButton : null}
          />
        }
      />
      <Announcer estimate={shown.estimate} pending={shown.pending} />
      {keeping.error !== null && (
        <ErrorState
          what="The estimate wasn’t kept; the change is still here."
          error={keeping.error}
          onRetry={keeping.keep}
        />
      )}
      {keeping.kept !== null && !changed && shownId === null && <KeptNote number={keeping.kept} />}
      {shown.error !== null && (
        <ErrorState
          what={shownId === null ? 'The estimate couldn’t be computed.' : 'The estimate couldn’t be loaded.'}
          error={shown.error}
          onRetry={shown.retry}
        />
      )}
      {shown.estimate !== null && (
        <MissingQuestion estimate={shown.estimate} draft={draft} readOnly={readOnly} />
      )}
      <Columns
        sections={[
          <TraceSection key="1" {...section} highlight={highlight} spurHz={spurHz} onSpur={setSpurHz} />,
          <LedgerSection key="2" {...section} onHighlight={setHighlight} />,
          <AveragingSection key="3" {...section} />,
          <SpursSection key="4" {...section} spurHz={spurHz} onSpur={setSpurHz} />,
          <SettingsSection key="5" {...section} />,
          <FindingsSection key="6" {...section} />,
          <EstimatesSection key="7" capture={capture} shownId={shownId} onShow={show} />,
        ]}
      />
      <Dock estimate={shown.estimate} pending={shown.pending} action={changed ? keepButton : null} />
    </>
  );
}

/** Two columns where they fit, else one in the order of the numbers. */
function Columns({ sections }: { sections: readonly React.ReactNode[] }) {
  const wide = useMedia('(min-width: 1181px)');
  if (!wide) return <div className="mt-5 grid grid-cols-[minmax(0,1fr)] gap-7">{sections}</div>;
  const [trace, ledger, averaging, spurs, settings, findings, estimates] = sections;
  return (
    <div className="mt-5 grid grid-cols-[minmax(0,1fr)_440px] items-start gap-9">
      <div className="grid grid-cols-[minmax(0,1fr)] gap-7">
        {trace}
        {averaging}
        {spurs}
        {settings}
      </div>
      <div className="grid grid-cols-[minmax(0,1fr)] gap-7">
        {ledger}
        {findings}
        {estimates}
      </div>
    </div>
  );
}
