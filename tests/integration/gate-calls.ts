import type { Target } from "../support/yard";

/** Who may make a call. creator: only who began the upload. */
export type Audience = "everybody" | "signed in" | "view" | "edit" | "manage" | "creator";

export interface GateCall {
  readonly method: string;
  readonly audience: Audience;
  /** Of the answer to who may. */
  readonly status: number;
  readonly params: (target: Target) => object;
  readonly path: (target: Target) => string;
  readonly init?: (target: Target) => RequestInit;
}

const json = (method: string, body: unknown): RequestInit => ({
  method,
  headers: { "content-type": "application/json" },
  body: JSON.stringify(body),
});
const base64 = (text: string) => Buffer.from(text).toString("base64");
const TUS = { "tus-resumable": "1.0.0" };

const ofProject = (rest: string) => ({
  params: ({ projectId }: Target) => ({ projectId }),
  path: ({ projectId }: Target) => `/api/projects/${projectId}${rest}`,
});
const ofFrame = (rest: string) => ({
  params: ({ projectId, frameId }: Target) => ({ projectId, frameId }),
  path: ({ projectId, frameId }: Target) => `/api/projects/${projectId}/frames/${frameId}/${rest}`,
});
const ofFile = (rest: string) => ({
  params: ({ projectId, fileId }: Target) => ({ projectId, fileId }),
  path: ({ projectId, fileId }: Target) => `/api/projects/${projectId}/files/${fileId}/${rest}`,
});
const ofUpload = {
  params: ({ uploadId }: Target) => ({ path: [uploadId] }),
  path: ({ uploadId }: Target) => `/api/uploads/${uploadId}`,
};
const ofProjects = { params: () => ({}), path: () => "/api/projects" };
const look = (place: Pick<GateCall, "params" | "path">): GateCall[] => [
  { method: "GET", audience: "view", status: 200, ...place },
];

/**
 * Every route and method of the product. A new route or method without an entry fails the matrix. next-auth's own is
 * for everybody and is tried over HTTP (tests/e2e/gate.spec.ts).
 */
export const GATE_CALLS: Readonly<Record<string, readonly GateCall[]>> = {
  "api/auth/[...nextauth]/route.ts": [],
  "api/health/route.ts": [
    // No worker runs here: the answer is that it does not.
    { method: "GET", audience: "everybody", status: 503, params: () => ({}), path: () => "/api/health" },
  ],
  "api/projects/route.ts": [
    { method: "GET", audience: "signed in", status: 200, ...ofProjects },
    { method: "POST", audience: "signed in", status: 201, ...ofProjects, init: () => json("POST", { name: "Mine" }) },
  ],
  "api/projects/[projectId]/route.ts": [
    ...look(ofProject("")),
    {
      method: "PATCH",
      audience: "manage",
      status: 200,
      ...ofProject(""),
      init: () => json("PATCH", { overlapWanted: 0.3 }),
    },
    {
      method: "DELETE",
      audience: "manage",
      status: 200,
      ...ofProject(""),
      init: ({ projectName }) => json("DELETE", { confirmation: projectName }),
    },
  ],
  "api/projects/[projectId]/board/route.ts": look(ofProject("/board")),
  "api/projects/[projectId]/commands/route.ts": [
    {
      method: "POST",
      audience: "edit",
      status: 200,
      ...ofProject("/commands"),
      init: () => json("POST", { id: crypto.randomUUID(), revision: 0, type: "add-line", axis: "row", at: 1 }),
    },
  ],
  "api/projects/[projectId]/events/route.ts": look(ofProject("/events")),
  "api/projects/[projectId]/files/route.ts": look(ofProject("/files")),
  "api/projects/[projectId]/files/[fileId]/original/route.ts": [
    { method: "GET", audience: "edit", status: 200, ...ofFile("original") },
    { method: "HEAD", audience: "edit", status: 200, ...ofFile("original"), init: () => ({ method: "HEAD" }) },
  ],
  "api/projects/[projectId]/presence/route.ts": [
    ...look(ofProject("/presence")),
    {
      method: "POST",
      audience: "view",
      status: 200,
      ...ofProject("/presence"),
      init: () => json("POST", { tile: "A1" }),
    },
  ],
  "api/projects/[projectId]/progress/route.ts": look(ofProject("/progress")),
  "api/projects/[projectId]/record/route.ts": look(ofProject("/record")),
  "api/projects/[projectId]/record/mine/route.ts": look(ofProject("/record/mine")),
  "api/projects/[projectId]/sorting/route.ts": [
    { method: "POST", audience: "edit", status: 202, ...ofProject("/sorting"), init: () => ({ method: "POST" }) },
  ],
  "api/projects/[projectId]/manifest/route.ts": look(ofProject("/manifest")),
  "api/projects/[projectId]/manifest.csv/route.ts": look(ofProject("/manifest.csv")),
  "api/projects/[projectId]/frames/[frameId]/crop/route.ts": look(ofFrame("crop?x=0&y=0&w=16&h=16")),
  "api/projects/[projectId]/frames/[frameId]/preview/route.ts": look(ofFrame("preview")),
  "api/projects/[projectId]/frames/[frameId]/thumbnail/route.ts": look(ofFrame("thumbnail")),
  "api/uploads/[[...path]]/route.ts": [
    {
      method: "OPTIONS",
      audience: "everybody",
      status: 204,
      params: () => ({}),
      path: () => "/api/uploads",
      init: () => ({ method: "OPTIONS" }),
    },
    {
      method: "POST",
      audience: "edit",
      status: 201,
      params: () => ({}),
      path: () => "/api/uploads",
      init: ({ projectId }) => ({
        method: "POST",
        headers: {
          ...TUS,
          "upload-length": "4",
          "upload-metadata": `projectId ${base64(projectId)},filename ${base64("NEW_0001.jpg")}`,
        },
      }),
    },
    {
      method: "HEAD",
      audience: "creator",
      status: 200,
      ...ofUpload,
      init: () => ({ method: "HEAD", headers: TUS }),
    },
    {
      method: "PATCH",
      audience: "creator",
      status: 204,
      ...ofUpload,
      init: () => ({
        method: "PATCH",
        headers: { ...TUS, "upload-offset": "0", "content-type": "application/offset+octet-stream" },
        body: "data",
      }),
    },
    {
      method: "DELETE",
      audience: "creator",
      status: 204,
      ...ofUpload,
      init: () => ({ method: "DELETE", headers: TUS }),
    },
  ],
};
