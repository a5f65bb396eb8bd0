import type { IconType } from "../ui/icon-type";

/** One place in the main navigation. The first four are in a phone's bottom bar, the others behind "More". */
export interface NavigationItem {
  to: string;
  label: string;
  /** For the phone's bottom bar, where a dozen letters fit. */
  short?: string;
  icon: IconType;
  /** How many things wait there; nothing is shown for 0. */
  count?: number;
  /** Current on exactly this address only. */
  end?: boolean;
}
