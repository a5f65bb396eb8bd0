/**
 * The address of one step. Keys hold ids of the map's elements, so they travel as a parameter.
 *
 * @param base the address of the unit on the bench: /w/:workshop/bench/:unit
 */
export function checkHref(base: string, key: string): string {
  return `${base}/check?${new URLSearchParams({ key }).toString()}`;
}
