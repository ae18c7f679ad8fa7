"use client";

import { skipToken, useQuery } from "@tanstack/react-query";
import { projectStatusQuery, shownStatusKey } from "@/lib/projects/queries";
import type { ProjectStatus } from "@/lib/projects/schema";

/** How far a project is: of the board that is open, else as the server knows it. */
export function useProjectStatus(projectId: string, initial: ProjectStatus, refetchInterval: number | false = false) {
  const { data, error } = useQuery({ ...projectStatusQuery(projectId), initialData: initial, refetchInterval });
  // Nobody asks for it: the board page leaves it there.
  const shown = useQuery<Omit<ProjectStatus, "frames"> | null>({
    queryKey: shownStatusKey(projectId),
    queryFn: skipToken,
  });
  return { status: { ...data, ...shown.data }, error };
}
