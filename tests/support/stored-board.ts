import { eq } from "drizzle-orm";
import { writeTransaction } from "@/db/client";
import { questions, seams } from "@/db/schema/board";
import { files, frames, stacks, uploads } from "@/db/schema/frames";
import { projects } from "@/db/schema/projects";
import type { Board } from "@/lib/board/model";
import { fileIdSchema, frameIdSchema, stackIdSchema, uploadIdSchema, type ProjectId, type UserId } from "@/lib/ids";
import type { Person } from "./people";

/** Rows of one statement: SQLite takes 32 766 values a statement. */
const ROWS_A_STATEMENT = 500;

/** Makes a board of tests/support/make-board.ts the project's, at revision 0 and with nothing in its record. */
export async function storeBoard(projectId: ProjectId, person: Person, board: Board): Promise<void> {
  const common = { projectId };
  const stackRows = board.stacks.map(({ position, spot, ...stack }) => ({
    ...stack,
    ...common,
    id: stackIdSchema.parse(stack.id),
    referenceId: stack.referenceId === null ? null : frameIdSchema.parse(stack.referenceId),
    shareUserId: stack.shareUserId as UserId | null,
    positionXPx: position?.xPx ?? null,
    positionYPx: position?.yPx ?? null,
    spotX: spot.x,
    spotY: spot.y,
  }));
  const frameRows = board.frames.map(({ shift, widthPx, heightPx, laplacianVariance, meanBrightness, ...frame }) => ({
    ...frame,
    ...common,
    id: frameIdSchema.parse(frame.id),
    stackId: frame.stackId === null ? null : stackIdSchema.parse(frame.stackId),
    shiftXPx: shift?.xPx ?? null,
    shiftYPx: shift?.yPx ?? null,
    measurements: { ...EMPTY, widthPx, heightPx, laplacianVariance, meanBrightness },
    createdAtMs: 0,
  }));
  const fileRows = board.frames.flatMap((frame) =>
    frame.files.map((file) => ({
      ...file,
      ...common,
      id: fileIdSchema.parse(file.id),
      frameId: frameIdSchema.parse(frame.id),
      uploadId: uploadIdSchema.parse(`upload-of-${file.id}`),
      pairingKey: file.name,
      state: "analysed" as const,
      isRaw: false,
      receivedAtMs: 0,
    })),
  );
  const uploadRows = fileRows.map(({ uploadId, name, bytes }) => ({
    ...common,
    id: uploadId,
    name,
    userId: person.id,
    lengthBytes: bytes,
    metadataHeader: "",
    createdAtMs: 0,
    finishedAtMs: 0,
  }));
  await writeTransaction(async (tx) => {
    const { rows, columns, shotOrder } = board.grid;
    await tx.update(projects).set({ rows, columns, shotOrder }).where(eq(projects.id, projectId));
    for (const part of parts(uploadRows)) await tx.insert(uploads).values(part);
    for (const part of parts(stackRows)) await tx.insert(stacks).values(part);
    for (const part of parts(frameRows)) await tx.insert(frames).values(part);
    for (const part of parts(fileRows)) await tx.insert(files).values(part);
    for (const part of parts(board.seams)) {
      await tx.insert(seams).values(
        part.map((seam) => ({
          ...seam,
          ...common,
          stackId: stackIdSchema.parse(seam.stackId),
          neighbourId: stackIdSchema.parse(seam.neighbourId),
        })),
      );
    }
    for (const part of parts(board.questions))
      await tx.insert(questions).values(part.map((q) => ({ ...q, ...common })));
  });
}

const EMPTY = { texture: 0, patches: { columns: 0, rows: 0, full: [], half: [], brightness: [] } };

function parts<Row>(rows: readonly Row[]): Row[][] {
  const count = Math.ceil(rows.length / ROWS_A_STATEMENT);
  return Array.from({ length: count }, (_, i) => rows.slice(i * ROWS_A_STATEMENT, (i + 1) * ROWS_A_STATEMENT));
}
