import { expect, test } from "vitest";
import { z } from "zod";
import { readJson } from "@/lib/http/read-json";

const schema = z.strictObject({ name: z.string() });
const send = (body: BodyInit, type = "application/json") =>
  readJson(new Request("http://yard.example", { method: "POST", headers: { "content-type": type }, body }), schema);

test("JSON is read and checked", async () => {
  expect(await send(`{"name": "Harbour"}`)).toEqual({ name: "Harbour" });
  expect(await send(`{"name": "Harbour"}`, "Application/JSON; charset=utf-8")).toEqual({ name: "Harbour" });
});

test.each(["text/plain", "application/x-www-form-urlencoded", "application/jsonp", ""])(
  "%j is not JSON",
  async (type) => {
    await expect(send("{}", type)).rejects.toMatchObject({ code: "unsupported_media_type", status: 415 });
  },
);

test.each(["", "{", "[1,]", "undefined"])("the body %j is refused", async (body) => {
  await expect(send(body)).rejects.toMatchObject({ code: "invalid", message: "The body is not valid JSON." });
});

test("each field that is wrong is named", async () => {
  await expect(send(`{"name": 7}`)).rejects.toMatchObject({ code: "invalid", fields: [{ field: "name" }] });
});

test("one mebibyte is read, a byte more is refused without reading on", async () => {
  const most = 1024 * 1024;
  const text = `{"name": "${"x".repeat(most - 12)}"}`;
  expect(text).toHaveLength(most);
  expect((await send(text)).name).toHaveLength(most - 12);
  let isCancelled = false;
  const endless = new ReadableStream<Uint8Array>({
    pull: (controller) => controller.enqueue(new Uint8Array(64 * 1024)),
    cancel: () => {
      isCancelled = true;
    },
  });
  const init = { method: "POST", headers: { "content-type": "application/json" }, body: endless, duplex: "half" };
  const request = new Request("http://yard.example", init as RequestInit);
  await expect(readJson(request, schema)).rejects.toMatchObject({ code: "too_large", status: 413 });
  expect(isCancelled).toBe(true);
});
