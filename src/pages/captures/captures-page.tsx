import { useRef, useState, type ReactNode } from 'react';
import { useDropzone } from 'react-dropzone';
import type { Campaign } from '../../../shared/capture.ts';
import { useCampaigns } from '../../api/campaigns.ts';
import { useHealth } from '../../api/session.ts';
import { addUploads } from '../../api/uploads.ts';
import { useKeyList } from '../../components/layout/key-sheet-state.ts';
import { PageHead } from '../../components/layout/page-head.tsx';
import { Button, LinkButton } from '../../components/ui/button.tsx';
import { Message } from '../../components/ui/message.tsx';
import { EmptyState, ErrorState } from '../../components/ui/states.tsx';
import { countWords, plural } from '../../lib/format.ts';
import { useKeysEnabled } from '../../lib/keys.ts';
import { useLab } from '../../lib/use-lab.ts';
import { CapturesTable } from './captures-table.tsx';
import { exportWholeList } from './export-list.ts';
import { NewCampaignDialog } from './new-campaign.tsx';
import { FilterSentence } from './filter-sentence.tsx';
import { useFiltering, type Filtering } from './filters.ts';
import { SelectionBar, useMovedNote } from './selection-bar.tsx';
import { UploadPanel } from './upload-panel.tsx';
import { UploadTarget, useUploadTarget } from './upload-target.tsx';
import { CAPTURES_KEYS, useRowKeys } from './use-row-keys.ts';
import { useRows } from './use-rows.ts';

const NO_CAMPAIGNS: readonly Campaign[] = [];

/** The lab's captures: drop files anywhere, find, order, select. */
export function CapturesPage() {
  const { lab } = useLab();
  const filtering = useFiltering();
  const campaigns = useCampaigns(lab.id);
  const campaignList = campaigns.data ?? NO_CAMPAIGNS;
  const rows = useRows(lab.id, filtering, campaignList);
  const target = useUploadTarget(lab.id, campaignList, filtering.address.campaign);
  const search = useRef<HTMLInputElement>(null);
  const { moves, note } = useMovedNote();
  const drop = useDropzone({
    noClick: true,
    noKeyboard: true,
    onDrop: (files: File[]) => addUploads(files, { labId: lab.id, campaignId: target.campaignId }),
  });
  const keys = useRowKeys(rows.items, { search: () => search.current?.focus(), choose: drop.open });
  const [onCampaign, setOnCampaign] = useState<((campaign: Campaign) => void) | null>(null);
  const askForCampaign = (then: (campaign: Campaign) => void) => setOnCampaign(() => then);
  useKeyList('Captures', CAPTURES_KEYS);
  const selected = rows.captures.filter(({ id }) => keys.selected.has(id));
  const labIsEmpty = rows.list.isSuccess && rows.captures.length === 0 && !filtering.filtered;

  return (
    <div
      {...drop.getRootProps({
        className: 'relative -mx-8 -mt-6 -mb-10 min-h-screen px-8 pt-6 pb-10 max-phone:-mx-4 max-phone:px-4',
      })}
    >
      <input {...drop.getInputProps({ 'aria-label': 'Trace exports to upload' })} />
      {drop.isDragActive && <DropVeil into={target.words} />}
      <PageHead
        title="Captures"
        actions={
          <>
            <CampaignCount campaigns={campaignList} />
            <ExportButton labId={lab.id} filtering={filtering} disabled={rows.captures.length === 0} />
            <Button kind={labIsEmpty ? 'secondary' : 'primary'} shortcut="n" onClick={drop.open}>
              Choose files
            </Button>
          </>
        }
      />
      <div className="mt-3 flex flex-wrap items-center gap-x-6 gap-y-1 border-t border-b border-t-ink border-b-rule py-2">
        <p className="text-table text-ink2">
          <strong className="text-body font-semibold text-ink max-phone:hidden">
            Drop trace exports anywhere on this page.
          </strong>{' '}
          CSV or text, up to 256&nbsp;MiB each. Every file is kept byte for byte.
        </p>
        <UploadTarget
          target={target}
          campaigns={campaignList}
          onNew={() => askForCampaign(({ id }) => target.choose(id))}
        />
      </div>
      <WorkerNotice />
      {note}
      <UploadPanel labId={lab.id} />
      {labIsEmpty ? (
        <EmptyState sentence={`No captures in ${lab.name} yet.`}>
          <Button kind="primary" onClick={drop.open}>
            Choose files
          </Button>
          or drop them anywhere on the page
        </EmptyState>
      ) : (
        <>
          <FilterSentence
            filtering={filtering}
            campaigns={campaignList}
            people={rows.people}
            searchRef={search}
            total={rows.list.isPlaceholderData ? null : rows.total}
          />
          {rows.list.isError && rows.captures.length === 0 ? (
            <ErrorState
              what="The captures couldn’t be loaded."
              error={rows.list.error}
              onRetry={() => void rows.list.refetch()}
            />
          ) : (
            <CapturesTable
              items={rows.items}
              loading={rows.list.isPending}
              grouped={rows.grouped}
              axis={rows.axis}
              selected={keys.selected}
              onSelect={keys.select}
              currentId={keys.currentId}
              onCurrent={keys.setCurrentId}
              placeholder={placeholderOf(
                rows,
                filtering,
                campaigns.data?.find(({ id }) => id === filtering.address.campaign)?.name,
                drop.open,
              )}
            />
          )}
          <Foot rows={rows} />
        </>
      )}
      <SelectionBar
        selected={selected}
        campaigns={campaignList}
        onClear={keys.clear}
        onNew={askForCampaign}
        moves={moves}
      />
      <NewCampaignDialog labId={lab.id} onMade={onCampaign} onClose={() => setOnCampaign(null)} />
    </div>
  );
}

function CampaignCount({ campaigns }: { campaigns: readonly Campaign[] }) {
  const used = campaigns.filter(({ captures }) => captures > 0);
  if (used.length === 0) return null;
  const captures = used.reduce((sum, campaign) => sum + campaign.captures, 0);
  return (
    <span className="mr-2 text-caption text-ink2 max-phone:hidden">
      {plural(captures, 'capture')} in {plural(used.length, 'campaign')}
    </span>
  );
}

type Rows = ReturnType<typeof useRows>;

function placeholderOf(
  rows: Rows,
  filtering: Filtering,
  campaign: string | undefined,
  choose: () => void,
): ReactNode {
  if (rows.list.isPending || rows.captures.length > 0) return undefined;
  const { search, state, verdict, person, since } = filtering.address;
  const campaignAlone = [search, state, verdict, person, since].every((value) => value === undefined);
  if (campaign !== undefined && campaignAlone) {
    return (
      <EmptyState sentence={`No captures in “${campaign}” yet.`}>
        <Button kind="primary" onClick={choose}>
          Choose files
        </Button>
        or drop them anywhere on the page
      </EmptyState>
    );
  }
  return (
    <EmptyState sentence="No capture is like that.">
      <Button onClick={filtering.clear}>Show all captures</Button>
    </EmptyState>
  );
}

function Foot({ rows: { list, captures, total } }: { rows: Rows }) {
  const keysEnabled = useKeysEnabled();
  if (captures.length === 0) return null;
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-1 border-t border-rule pt-3 text-caption text-ink2">
      {keysEnabled && (
        <p className="max-phone:hidden">
          <span className="font-mono">j</span> <span className="font-mono">k</span> move,{' '}
          <span className="font-mono">Enter</span> opens, <span className="font-mono">x</span> selects,{' '}
          <span className="font-mono">?</span> all keys
        </p>
      )}
      <p className="ml-auto">
        1–{countWords(captures.length)}
        {total !== null && ` of ${countWords(total)}`}
      </p>
      {list.hasNextPage && (
        <LinkButton onClick={() => void list.fetchNextPage()} disabled={list.isFetchingNextPage}>
          {list.isFetchingNextPage ? 'Loading…' : 'Show more'}
        </LinkButton>
      )}
      {list.isFetchNextPageError && (
        <span role="alert" className="text-bad">
          {list.error.message}
        </span>
      )}
    </div>
  );
}

function WorkerNotice() {
  const health = useHealth();
  if (health.data === undefined || health.data.worker) return null;
  return (
    <Message tone="waiting" live="polite" title="No worker is running.">
      Files are stored and wait. They are read as soon as a worker is back; nothing has to be sent again.
    </Message>
  );
}

function ExportButton({
  labId,
  filtering,
  disabled,
}: {
  labId: string;
  filtering: Filtering;
  disabled: boolean;
}) {
  const [state, setState] = useState<'idle' | 'busy' | 'failed'>('idle');
  const run = () => {
    setState('busy');
    exportWholeList(labId, filtering.query).then(
      () => setState('idle'),
      () => setState('failed'),
    );
  };
  return (
    <Button onClick={run} disabled={disabled || state === 'busy'}>
      {state === 'busy' ? 'Exporting…' : state === 'failed' ? 'Export failed; again?' : 'Export list'}
    </Button>
  );
}

function DropVeil({ into }: { into: string }) {
  return (
    <div className="pointer-events-none fixed inset-0 z-30 grid place-items-center border-2 border-est bg-paper/85">
      <p className="text-verdict">Let go to read them into {into}.</p>
    </div>
  );
}
