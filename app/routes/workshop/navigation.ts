import {
  Archive,
  BadgeCheck,
  ClipboardCheck,
  Gauge,
  LayoutDashboard,
  PenLine,
  Settings,
  Users,
  Zap,
} from "lucide-react";
import type { IconType } from "~/components/ui/icon-type";
import type { NavigationItem } from "~/components/shell/navigation-item";
import { type Action, decide } from "~/workflow/permissions";
import type { Role } from "~/workflow/roles";
import type { WaitingCounts } from "./use-queue-counts";

interface Place {
  path: string;
  label: string;
  icon: IconType;
  action: Action;
  /** Which of the counts of what waits stands beside it. */
  count?: keyof WaitingCounts;
}

const places: Place[] = [
  { path: "", label: "Overview", icon: LayoutDashboard, action: "workshop.visit" },
  { path: "/units", label: "Units", icon: Zap, action: "unit.list" },
  { path: "/bench", label: "Bench", icon: ClipboardCheck, action: "bench.queue", count: "toInspect" },
  { path: "/signing", label: "Signing", icon: PenLine, action: "signing.queue", count: "toSign" },
  { path: "/archive", label: "Archive", icon: Archive, action: "archive.search" },
  { path: "/people", label: "People", icon: Users, action: "people.read" },
  { path: "/licences", label: "Licences", icon: BadgeCheck, action: "licences.manage" },
  { path: "/instruments", label: "Instruments", icon: Gauge, action: "instruments.read" },
  { path: "/settings", label: "Settings", icon: Settings, action: "workshop.manage" },
];

/** The places of a workshop that the permission table opens to a person with these roles. */
export function navigationFor(
  workshop: { slug: string; roles: readonly Role[] },
  personId: number,
  counts: WaitingCounts | null,
): NavigationItem[] {
  return places
    .filter(({ action }) => decide(action, { id: personId, roles: workshop.roles }).allowed)
    .map(({ path, label, icon, count }) => ({
      to: `/w/${workshop.slug}${path}`,
      label,
      icon,
      end: path === "",
      count: count && counts ? counts[count] : undefined,
    }));
}
