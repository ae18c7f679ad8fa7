import { z } from "zod";
import { route } from "@/lib/http/route";
import { uploadIdSchema } from "@/lib/ids";
import { answerByTus, withTusHeaders } from "@/lib/intake/tus-server";
import { beginUpload, continueUpload, endUpload, inspectUpload } from "@/lib/intake/uploads";

const collectionSchema = z.object({ path: z.undefined().optional() });
const uploadSchema = z.object({ path: z.tuple([uploadIdSchema]) });

export const OPTIONS = withTusHeaders(route(z.looseObject({}), (request) => answerByTus(request)));
export const POST = withTusHeaders(route(collectionSchema, (request) => beginUpload(request)));
export const HEAD = withTusHeaders(route(uploadSchema, (request, { path: [id] }) => inspectUpload(request, id)));
export const PATCH = withTusHeaders(route(uploadSchema, (request, { path: [id] }) => continueUpload(request, id)));
export const DELETE = withTusHeaders(route(uploadSchema, (request, { path: [id] }) => endUpload(request, id)));
