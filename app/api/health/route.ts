import { z } from "zod";
import { getHealth } from "@/lib/jobs/health";
import { route } from "@/lib/http/route";

export const GET = route(z.looseObject({}), async () => {
  const health = await getHealth(Date.now());
  const status = health.status === "ok" ? 200 : 503;
  return Response.json(health, { status, headers: { "cache-control": "no-store" } });
});

/** Looked at on every call, never at build time. */
export const dynamic = "force-dynamic";
