"use client";

import { useProjectStatus } from "@/components/shell/use-project-status";
import { countOf } from "@/lib/board/words";
import type { ProjectStatus } from "@/lib/projects/schema";

interface GridSizeProps {
  readonly projectId: string;
  /** As the server rendered it. */
  readonly initial: ProjectStatus;
}

/** "3 rows × 6 columns"; nothing while there is no grid. */
export function GridSize({ projectId, initial }: GridSizeProps) {
  const { status: data } = useProjectStatus(projectId, initial);
  if (data.rows === 0 || data.columns === 0) return null;
  return (
    <p className="figures text-sm text-quiet max-sm:order-last max-sm:w-full">
      {countOf(data.rows, "row")} × {countOf(data.columns, "column")}
    </p>
  );
}
