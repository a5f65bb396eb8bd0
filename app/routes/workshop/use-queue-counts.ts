import { useEffect, useState } from "react";
import { useLocation } from "react-router";
import { z } from "zod";

const countsSchema = z.object({
  yours: z.object({
    toInspect: z.number(),
    onBench: z.number(),
    toSign: z.number(),
    sentBack: z.number(),
    drafts: z.number(),
  }),
});

/** What waits for the signed-in person, by kind. */
export type WaitingCounts = z.infer<typeof countsSchema>["yours"];

/**
 * The queue counts of a workshop, fetched in the browser: once the page stands, after every change of page, and when
 * the window gets the focus again. Null until the first answer; when one fails, the last that came. A plain fetch
 * rather than a fetcher: a fetcher that fails puts an error page in place of whatever somebody is typing.
 */
export function useQueueCounts(slug: string): WaitingCounts | null {
  const [counts, setCounts] = useState<WaitingCounts | null>(null);
  const { key } = useLocation();
  useEffect(() => {
    const ending = new AbortController();
    const refresh = async () => {
      try {
        const response = await fetch(`/api/w/${slug}/queues`, { signal: ending.signal });
        const parsed = countsSchema.safeParse(response.ok ? await response.json() : null);
        if (parsed.success) setCounts(parsed.data.yours);
      } catch {
        // The network is away or the page was left; the counts are a convenience and wait for the next occasion.
      }
    };
    const onFocus = () => void refresh();
    onFocus();
    window.addEventListener("focus", onFocus);
    return () => {
      ending.abort();
      window.removeEventListener("focus", onFocus);
    };
  }, [slug, key]);
  return counts;
}
