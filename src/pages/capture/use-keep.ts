import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { SettingChanges } from '../../../shared/settings.ts';
import type { Capture } from '../../../shared/capture.ts';
import { captureKeys, changeCapture } from '../../api/captures.ts';
import { estimateKeys, keepEstimate } from '../../api/estimates.ts';
import type { DraftControls } from './contract.ts';
import { askOf } from './use-shown-estimate.ts';

/** Keeps the draft as the capture's next estimate: first its settings, then the estimate, then the draft is empty. */
export function useKeep(capture: Capture, draft: DraftControls) {
  const client = useQueryClient();
  const [kept, setKept] = useState<number | null>(null);
  const mutation = useMutation({
    mutationFn: async () => {
      const { settings, ...rest } = askOf(draft.draft);
      if (settings === undefined) return keepEstimate(capture.id, rest);
      if (!capture.may.edit) return keepEstimate(capture.id, { ...rest, settings });
      client.setQueryData(
        captureKeys.detail(capture.id),
        await changeCapture(capture.id, { settings: SettingChanges.parse(settings) }),
      );
      return keepEstimate(capture.id, rest);
    },
    onSuccess: async (estimate) => {
      if (estimate.id !== null) client.setQueryData(estimateKeys.detail(estimate.id), estimate);
      await client.invalidateQueries({ queryKey: captureKeys.detail(capture.id) });
      void client.invalidateQueries({ queryKey: captureKeys.lists });
      setKept(estimate.number);
      draft.reset();
    },
  });
  return {
    keep: () => {
      if (!mutation.isPending) mutation.mutate();
    },
    keeping: mutation.isPending,
    error: mutation.error,
    /** Number of the estimate that was kept last on this visit. */
    kept,
  };
}
