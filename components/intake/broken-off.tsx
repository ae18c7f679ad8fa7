"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { bytesText, countOf, percent } from "@/lib/board/words";
import { frameKeys } from "@/lib/frames/queries";
import type { UnfinishedUpload } from "@/lib/frames/schema";
import { cancelBrokenUpload } from "@/lib/uploads/cancel-upload";

interface BrokenOffProps {
  readonly projectId: string;
  /** Begun and not finished, and not on the way from this tab. */
  readonly uploads: readonly UnfinishedUpload[];
}

/** Uploads that broke off, as after a reload: the same files go on where they stood. */
export function BrokenOff({ projectId, uploads }: BrokenOffProps) {
  const client = useQueryClient();
  const mine = uploads.filter((upload) => upload.isMine);
  const cancel = useMutation({
    mutationFn: async () => {
      for (const upload of mine) await cancelBrokenUpload(upload.url);
    },
    onSettled: () => client.invalidateQueries({ queryKey: frameKeys.all(projectId) }),
  });
  if (uploads.length === 0) return null;
  if (mine.length === 0) {
    return <Notice title={`${countOf(uploads.length, "file")} on the way from somebody else`} />;
  }
  return (
    <Notice tone="ochre" title={`${countOf(mine.length, "upload")} broke off`}>
      <p>Drop or choose the same files again: each goes on where it stood. Or cancel them.</p>
      <ul className="figures mt-2 max-h-40 overflow-y-auto text-sm">
        {mine.map((upload) => (
          <li key={upload.id} className="break-all">
            {upload.folder ? `${upload.folder}/` : ""}
            {upload.name}, {percent(upload.receivedBytes / Math.max(1, upload.bytes))} of {bytesText(upload.bytes)} in
          </li>
        ))}
      </ul>
      {cancel.error && (
        <p role="alert" className="mt-2 font-semibold">
          {cancel.error.message}
        </p>
      )}
      <Button size="slim" className="mt-2" isBusy={cancel.isPending} onClick={() => cancel.mutate()}>
        Cancel {countOf(mine.length, "upload")}
      </Button>
    </Notice>
  );
}
