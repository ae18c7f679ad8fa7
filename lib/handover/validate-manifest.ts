import Ajv2020 from "ajv/dist/2020";
import addFormats from "ajv-formats";
import schema from "@/public/manifest.schema.json";

// `strict: false`: the schema uses no custom words, but ajv's strict mode objects to unions of types.
const ajv = new Ajv2020({ strict: false, allErrors: false });
addFormats(ajv);
const validate = ajv.compile(schema);

/**
 * Makes sure that a value is a manifest by the schema that the product serves.
 * @throws Error naming the place and the fault
 */
export function assertManifest(value: unknown): void {
  if (validate(value)) return;
  const fault = validate.errors?.[0];
  throw new Error(`not a valid manifest: ${fault?.instancePath || "the whole"} ${fault?.message ?? "is wrong"}`);
}
