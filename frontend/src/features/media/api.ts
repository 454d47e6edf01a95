import { MediumDto } from "@heddle/backend/contract";
import type { Medium } from "@heddle/kernels/scene";
import { mediumSchema } from "@heddle/kernels/scene";
import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { z } from "zod";
import { request } from "../../lib/api";

const MEDIA = ["media"] as const;

/** A medium of the library as this page uses it. */
export interface LibraryMedium {
  /** The entry's own id; the medium's id is what scenes write. */
  entryId: string;
  medium: Medium;
  source: string;
  updatedAt: string;
}

const read = (dto: MediumDto): LibraryMedium => ({
  entryId: dto.id,
  medium: mediumSchema.parse(dto.medium),
  source: dto.source,
  updatedAt: dto.updatedAt,
});

/** The workspace's library of media. */
export const useMedia = () =>
  useQuery({
    queryKey: MEDIA,
    queryFn: ({ signal }) => request("GET", "/api/media", { answer: z.array(MediumDto), signal }),
    select: (media) => media.map(read),
  });

export interface SaveMedium {
  /** Left out for a new entry. */
  entryId?: string;
  medium: Medium;
  source: string;
}

export function useSaveMedium() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ entryId, ...body }: SaveMedium) =>
      entryId === undefined
        ? request("POST", "/api/media", { body, answer: MediumDto })
        : request("PUT", `/api/media/${entryId}`, { body, answer: MediumDto }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: MEDIA }),
  });
}

export function useDeleteMedium() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (entryId: string) => request("DELETE", `/api/media/${entryId}`),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: MEDIA }),
  });
}
