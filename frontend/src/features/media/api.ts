import type { MediumDto } from "@heddle/backend/contract";
import type { Medium } from "@heddle/kernels/scene";
import { mediumSchema } from "@heddle/kernels/scene";
import type { ReactNode } from "react";
import { useQueryClient } from "@tanstack/react-query";
import { $api } from "../../lib/api";

/** Draws a small cut of a medium as it looks on the sheet at a frequency in GHz. */
export type Swatch = (medium: Medium, gigahertz: number) => ReactNode;

/** A medium of the library as this page uses it. */
export interface LibraryMedium {
  /** The entry's own id; the medium's id is what scenes write. */
  id: string;
  medium: Medium;
  source: string;
  updatedAt: string;
}

const read = (dto: MediumDto): LibraryMedium => ({
  id: dto.id,
  medium: mediumSchema.parse(dto.medium),
  source: dto.source,
  updatedAt: dto.updatedAt,
});

/** The workspace's library of media. */
export const useMedia = () =>
  $api.useQuery("get", "/api/media", undefined, { select: (media) => media.map(read) });

const useRefresh = () => {
  const queryClient = useQueryClient();
  return () => queryClient.invalidateQueries({ queryKey: ["get", "/api/media"] });
};

export const useCreateMedium = () => $api.useMutation("post", "/api/media", { onSuccess: useRefresh() });

export const useUpdateMedium = () =>
  $api.useMutation("put", "/api/media/{mediumId}", { onSuccess: useRefresh() });

export const useDeleteMedium = () =>
  $api.useMutation("delete", "/api/media/{mediumId}", { onSuccess: useRefresh() });
