import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { Campaign, type CampaignRequest } from '../../shared/capture.ts';
import { page } from '../../shared/problem.ts';
import { request } from './http.ts';

export const campaignKeys = {
  all: ['campaigns'] as const,
  list: (labId: string) => ['campaigns', labId] as const,
};

/** A lab's campaigns with their limits and numbers of captures. */
export const campaignsOptions = (labId: string) =>
  queryOptions({
    queryKey: campaignKeys.list(labId),
    queryFn: async ({ signal }) =>
      (await request(page(Campaign), `/api/labs/${labId}/campaigns`, { signal })).items,
    staleTime: 60_000,
  });

export const useCampaigns = (labId: string) => useQuery(campaignsOptions(labId));

export function useCreateCampaign(labId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: CampaignRequest) =>
      request(Campaign, `/api/labs/${labId}/campaigns`, { method: 'POST', body }),
    onSuccess: () => client.invalidateQueries({ queryKey: campaignKeys.list(labId) }),
  });
}
