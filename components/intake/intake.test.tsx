// @vitest-environment jsdom
import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { cleanup, render, screen, waitFor, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { Intake } from "@/components/intake/intake";
import { UploadsProvider } from "@/components/intake/uploads-provider";

/** A server of two lists that takes every upload in one go, or answers it with `status`. */
const server: { files: unknown[]; uploads: unknown[]; status: number; sent: string[] } = {
  files: [],
  uploads: [],
  status: 201,
  sent: [],
};

// The network's edge: the browser build of the client needs a real XMLHttpRequest; the end-to-end tests use that one.
vi.mock("tus-js-client", () => {
  class DetailedError extends Error {
    readonly originalResponse = {
      getStatus: () => server.status,
      getBody: () => JSON.stringify({ code: "unauthenticated", detail: "Sign in first." }),
    };
  }
  interface Options {
    readonly metadata: Readonly<Record<string, string>>;
    readonly onSuccess: () => void;
    readonly onError: (error: Error) => void;
  }
  class Upload {
    constructor(
      readonly file: Blob,
      readonly options: Options,
    ) {}
    start() {
      setTimeout(() => {
        if (server.status !== 201) return this.options.onError(new DetailedError("refused"));
        server.sent.push(this.options.metadata.filename ?? "");
        this.options.onSuccess();
      }, 0);
    }
    async abort() {}
  }
  return { DetailedError, Upload };
});

beforeEach(() => {
  Object.assign(server, { files: [], uploads: [], status: 201, sent: [] });
  vi.stubGlobal(
    "ResizeObserver",
    class {
      observe() {}
      unobserve() {}
      disconnect() {}
    },
  );
  for (const name of ["offsetHeight", "offsetWidth"] as const) {
    vi.spyOn(HTMLElement.prototype, name, "get").mockReturnValue(600);
  }
  vi.stubGlobal("fetch", async (url: string) =>
    Response.json(
      url.endsWith("/progress")
        ? { received: server.files.length, analysed: 0, failed: 0, total: server.files.length, sorted: true }
        : { files: server.files, uploads: server.uploads, sortError: null },
    ),
  );
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

function open(canEdit = true) {
  render(
    <QueryClientProvider client={new QueryClient()}>
      <UploadsProvider>
        <Intake projectId="p1" canEdit={canEdit} />
      </UploadsProvider>
    </QueryClientProvider>,
  );
}

function listed(state: string, more: object = {}) {
  return {
    id: `file-${server.files.length}`,
    name: "HARB0001.JPG",
    folder: "shoot",
    bytes: 7_400_000,
    lastModifiedMs: 5,
    sha256: null,
    state,
    reason: null,
    duplicateOf: null,
    isRaw: false,
    frameId: null,
    receivedAtMs: 0,
    ...more,
  };
}

const picture = (name: string) => new File(["x"], name, { type: "image/jpeg", lastModified: 5 });

test("a viewer sees what came in and no place to drop files", async () => {
  server.files = [listed("analysed")];
  open(false);
  expect(await screen.findByText("measured")).toBeDefined();
  expect(screen.queryByRole("button", { name: "Choose files" })).toBeNull();
});

test("what was refused is listed with its reason, a duplicate with what it equals", async () => {
  server.files = [
    listed("failed", { id: "a", name: "notes.jpg", reason: "This is text, not a picture." }),
    listed("duplicate", { id: "b", duplicateOf: { id: "c", name: "HARB0001.JPG", folder: null } }),
  ];
  open();
  expect(await screen.findByText("This is text, not a picture.")).toBeDefined();
  expect(screen.getByText("Here already: byte for byte HARB0001.JPG")).toBeDefined();
  await userEvent.click(screen.getByRole("button", { name: "Could not be read 1" }));
  expect(within(screen.getByRole("list", { name: "Files that came in" })).getAllByRole("listitem")).toHaveLength(1);
});

test("chosen pictures are sent with their names, others are listed as not taken", async () => {
  open();
  await screen.findByText(/^Nothing yet/);
  await userEvent.upload(screen.getByLabelText("Files to bring in"), [picture("a.jpg"), picture("b.jpg")]);
  await userEvent.upload(screen.getByLabelText("Folder to bring in"), [new File(["hello"], "notes.txt")]);
  expect(await screen.findByText("2 of 2 files in", { exact: false })).toBeDefined();
  expect(await screen.findByText("1 other file not taken")).toBeDefined();
  expect([...server.sent].sort()).toEqual(["a.jpg", "b.jpg"]);
});

test("a session that ended pauses the uploads and says what to do", async () => {
  server.status = 401;
  open();
  await screen.findByText(/^Nothing yet/);
  await userEvent.upload(screen.getByLabelText("Files to bring in"), [picture("a.jpg")]);
  expect(await screen.findByText("Your session has ended. Sign in again to go on.")).toBeDefined();
  server.status = 201;
  await userEvent.click(screen.getByRole("button", { name: "Go on" }));
  await waitFor(() => expect(screen.queryByText("1 of 1 file in", { exact: false })).not.toBeNull());
});

test("an upload that broke off says how to go on with it", async () => {
  server.uploads = [
    {
      id: "u1",
      url: "/api/uploads/u1",
      name: "big.tif",
      folder: null,
      lastModifiedMs: 5,
      bytes: 100,
      receivedBytes: 40,
      isMine: true,
      createdAtMs: 0,
    },
  ];
  open();
  expect(await screen.findByText("1 upload broke off")).toBeDefined();
  expect(screen.getByText(/big.tif, 40 % of 100 B in/)).toBeDefined();
});
