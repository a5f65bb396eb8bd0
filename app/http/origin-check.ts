/** What the origin check looks at. Header values as they came; null when absent. */
export interface RequestOrigin {
  method: string;
  secFetchSite: string | null;
  origin: string | null;
  /** Origins that are ours: the public address, and the one that this request was sent to. */
  ownOrigins: readonly string[];
}

const SAFE_METHODS = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * Why a request that changes something must be refused, or null when it may pass. Another site can make a browser send
 * a form here with the person's cookie, but it can forge neither of these two headers.
 *
 * Sec-Fetch-Site decides where it is sent (W3C Fetch Metadata; browsers send it to https and localhost); otherwise
 * Origin does. A request with neither comes from no browser of the last years and is refused.
 */
export function refusalByOrigin({ method, secFetchSite, origin, ownOrigins }: RequestOrigin): string | null {
  if (SAFE_METHODS.has(method)) return null;
  if (secFetchSite !== null) {
    // "none" is the person's own doing, such as reloading a page; a page can't cause it.
    if (secFetchSite === "same-origin" || secFetchSite === "none") return null;
    return "This form was sent from another site, so nothing was changed. Please open the page here and send it again.";
  }
  if (origin === null) return "The request does not say which site it comes from, so nothing was changed.";
  if (ownOrigins.includes(origin)) return null;
  return "This form was sent from another address than the one Mainsgate runs at, so nothing was changed.";
}
