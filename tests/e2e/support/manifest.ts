import { readFileSync } from "node:fs";
import type { APIRequestContext } from "@playwright/test";
import { expect } from "@playwright/test";
import { Ajv2020 } from "ajv/dist/2020.js";
import addFormats from "ajv-formats";
import type { Manifest } from "@/lib/handover/manifest-types";

const ajv = new Ajv2020({ strict: false, allErrors: true });
addFormats.default(ajv);
// From the file, not from the product's own module: the same schema, read by another way.
const validate = ajv.compile(JSON.parse(readFileSync("public/manifest.schema.json", "utf8")));

/** A project's manifest as it is now, valid by the schema (JSON Schema 2020-12, judged by ajv). */
export async function getManifest(request: APIRequestContext, projectId: string): Promise<Manifest> {
  const answer = await request.get(`/api/projects/${projectId}/manifest`);
  expect(answer.status(), await answer.text()).toBe(200);
  const manifest = await answer.json();
  validate(manifest);
  expect(validate.errors ?? []).toEqual([]);
  return manifest;
}
