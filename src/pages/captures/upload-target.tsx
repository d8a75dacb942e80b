import { useState } from 'react';
import type { Campaign } from '../../../shared/capture.ts';
import { Select } from '../../components/ui/listbox.tsx';

const NONE = 'none';
const NEW = 'new';

export interface Target {
  campaignId: string | null;
  /** The campaign's name, for a sentence. */
  words: string;
  choose: (campaignId: string | null) => void;
}

const keyOf = (labId: string) => `perhertz.into.${labId}`;

function remembered(labId: string): string | null {
  try {
    return sessionStorage.getItem(keyOf(labId));
  } catch {
    return null;
  }
}

/** The campaign that dropped files go into: the one chosen, else the one that the table is filtered by. */
export function useUploadTarget(
  labId: string,
  campaigns: readonly Campaign[],
  filterCampaignId: string | undefined,
): Target {
  const [chosen, setChosen] = useState(() => remembered(labId));
  const wanted = chosen ?? filterCampaignId ?? NONE;
  const campaign = campaigns.find(({ id }) => id === wanted);
  return {
    campaignId: campaign?.id ?? null,
    words: campaign === undefined ? 'no campaign' : `“${campaign.name}”`,
    choose: (campaignId) => {
      setChosen(campaignId ?? NONE);
      try {
        sessionStorage.setItem(keyOf(labId), campaignId ?? NONE);
      } catch {
        return;
      }
    },
  };
}

interface UploadTargetProps {
  target: Target;
  campaigns: readonly Campaign[];
  onNew: () => void;
}

/** “into …”, at the right of the drop line. */
export function UploadTarget({ target, campaigns, onNew }: UploadTargetProps) {
  return (
    <p className="ml-auto flex items-center gap-1.5 text-caption text-ink2 max-phone:ml-0">
      into
      <Select
        look="inline"
        label="Campaign for new captures"
        value={target.campaignId ?? NONE}
        onChange={(value) => (value === NEW ? onNew() : target.choose(value === NONE ? null : value))}
        options={[
          { value: NONE, label: 'no campaign' },
          ...campaigns.map(({ id, name }) => ({ value: id, label: name })),
          { value: NEW, label: 'a new campaign…' },
        ]}
      />
    </p>
  );
}
