import { memo, useEffect, useState, type RefObject } from 'react';
import type { Campaign, CaptureSort, Person } from '../../../shared/capture.ts';
import { Kbd } from '../../components/ui/kbd.tsx';
import { Select, type Option } from '../../components/ui/listbox.tsx';
import { plural } from '../../lib/format.ts';
import { SINCE, sinceWords, type Filtering, type Since } from './filters.ts';
import { CAPTURE_STATES } from './state-words.ts';

const ANY = 'any';

const STATES: Option[] = [
  { value: ANY, label: 'in any state' },
  ...Object.entries(CAPTURE_STATES).map(([value, { word }]) => ({ value, label: word.toLowerCase() })),
];
const WAYS: Option[] = [
  { value: ANY, label: 'in any way' },
  { value: 'declared', label: 'as declared' },
  { value: 'other', label: 'otherwise than declared' },
  { value: 'none', label: 'in no way that fits' },
  { value: 'undetermined', label: 'in a way that can’t be told' },
];
const SORTS: (Option & { value: CaptureSort })[] = [
  { value: 'newest', label: 'newest first' },
  { value: 'oldest', label: 'oldest first' },
  { value: 'name', label: 'by name' },
  { value: 'density', label: 'lowest density first' },
  { value: 'state', label: 'by state' },
];
const GROUPS: Option[] = [
  { value: 'campaign', label: 'in campaigns' },
  { value: 'no', label: 'as one list' },
];
const TIMES: Option[] = [
  { value: ANY, label: 'the beginning' },
  ...Object.entries(SINCE).map(([value, days]) => ({
    value,
    label: sinceWords(isSince(value) ? value : 'today'),
    note: days === 0 ? undefined : `${days} days`,
  })),
];

function isSince(value: string): value is Since {
  return Object.hasOwn(SINCE, value);
}

interface Props {
  filtering: Filtering;
  campaigns: readonly Campaign[];
  people: readonly Person[];
  searchRef: RefObject<HTMLInputElement | null>;
  /** How many captures there are under these filters; null while it isn't known. */
  total: number | null;
}

/** Search, filters as a sentence, order. */
export const FilterSentence = memo(function FilterSentence({
  filtering,
  campaigns,
  people,
  searchRef,
  total,
}: Props) {
  const { address, change } = filtering;
  const set = (name: 'state' | 'verdict' | 'campaign' | 'person' | 'since') => (value: string) =>
    change({ [name]: value === ANY ? undefined : value });
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-1.5 pt-3 pb-1.5">
      <Search filtering={filtering} searchRef={searchRef} />
      <div className="text-table leading-7 text-ink2 max-phone:leading-9">
        Captures in{' '}
        <Select
          look="inline"
          label="Campaign"
          value={address.campaign ?? ANY}
          onChange={set('campaign')}
          options={[
            { value: ANY, label: 'any campaign' },
            ...campaigns.map(({ id, name, captures }) => ({
              value: id,
              label: name,
              note: String(captures),
            })),
            ...unknown(address.campaign, campaigns, 'another campaign'),
          ]}
        />{' '}
        that are{' '}
        <span className="whitespace-nowrap">
          <Select
            look="inline"
            label="State"
            value={address.state ?? ANY}
            onChange={set('state')}
            options={STATES}
          />
          ,
        </span>{' '}
        averaged{' '}
        <span className="whitespace-nowrap">
          <Select
            look="inline"
            label="Averaging"
            value={address.verdict ?? ANY}
            onChange={set('verdict')}
            options={WAYS}
          />
          ,
        </span>{' '}
        by{' '}
        <span className="whitespace-nowrap">
          <Select
            look="inline"
            label="Person"
            value={address.person ?? ANY}
            onChange={set('person')}
            options={[
              { value: ANY, label: 'anyone' },
              ...people.map(({ id, name }) => ({ value: id, label: name })),
              ...unknown(address.person, people, 'someone else'),
            ]}
          />
          ,
        </span>{' '}
        since{' '}
        <Select
          look="inline"
          label="Since"
          value={address.since ?? ANY}
          onChange={set('since')}
          options={TIMES}
        />
      </div>
      <div className="ml-auto flex flex-wrap items-center gap-x-2 text-caption text-ink3 max-phone:ml-0">
        <span role="status" className="empty:hidden">
          {total === null ? '' : `${plural(total, 'capture')},`}
        </span>
        <Select
          look="inline"
          label="Order"
          className="text-caption! font-normal!"
          value={address.sort}
          onChange={(value) =>
            change({ sort: SORTS.find((sort) => sort.value === value)?.value ?? 'newest' })
          }
          options={SORTS}
        />
        <Select
          look="inline"
          label="Grouping"
          className="text-caption! font-normal!"
          value={address.grouped}
          onChange={(value) => change({ grouped: value === 'no' ? 'no' : 'campaign' })}
          options={GROUPS}
        />
      </div>
    </div>
  );
});

/** A choice from the address that isn't among those known here, so that the button still says something. */
function unknown(id: string | undefined, known: readonly { id: string }[], label: string): Option[] {
  return id === undefined || known.some((item) => item.id === id) ? [] : [{ value: id, label }];
}

function Search({ filtering: { address, change }, searchRef }: Pick<Props, 'filtering' | 'searchRef'>) {
  const said = address.search ?? '';
  const [text, setText] = useState(said);
  const [before, setBefore] = useState(said);
  if (before !== said) {
    setBefore(said);
    if (text.trim() !== said) setText(said);
  }
  useEffect(() => {
    if (text.trim() === said) return;
    const timer = setTimeout(() => change({ search: text.trim() || undefined }, said !== ''), 200);
    return () => clearTimeout(timer);
  }, [text, said, change]);
  return (
    <div role="search" className="relative w-[216px] max-phone:w-full">
      <input
        ref={searchRef}
        type="search"
        aria-label="Search by name, file, number or person"
        placeholder="Name, file or person"
        className="field h-[30px]! pr-7 max-phone:h-10! [&::-webkit-search-cancel-button]:hidden"
        value={text}
        onChange={(event) => setText(event.target.value)}
        onKeyDown={(event) => {
          if (event.key !== 'Escape') return;
          if (text === '') event.currentTarget.blur();
          else setText('');
        }}
      />
      {text === '' && (
        <span className="pointer-events-none absolute inset-y-0 right-2 flex items-center text-ink3 max-phone:hidden">
          <Kbd>/</Kbd>
        </span>
      )}
    </div>
  );
}
