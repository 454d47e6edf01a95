import { ConfirmDialog } from "../../components/confirm-dialog";
import type { LibraryMedium } from "./api";
import { useDeleteMedium } from "./api";

/** Takes a medium off the library; scenes keep their own copy. */
export function DeleteMediumDialog({ entry, onClose }: { entry: LibraryMedium; onClose: () => void }) {
  const remove = useDeleteMedium();
  return (
    <ConfirmDialog
      title={`Delete “${entry.medium.name}”?`}
      confirm="Delete the medium"
      pending={remove.isPending}
      error={remove.error}
      onConfirm={() => remove.mutate({ params: { path: { mediumId: entry.id } } }, { onSuccess: onClose })}
      onClose={onClose}
    >
      It leaves the library. Scenes painted with it keep their own copy of its figures.
    </ConfirmDialog>
  );
}
