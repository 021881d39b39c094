// Tells a watcher whether pages can be served: 200, or 503 while the database does not answer.
import { isHealthy } from "~/services/health.server";

export async function loader() {
  const healthy = await isHealthy();
  const headers = { "Content-Type": "text/plain; charset=utf-8", "Cache-Control": "no-store" };
  return new Response(healthy ? "ok\n" : "no database\n", { status: healthy ? 200 : 503, headers });
}
