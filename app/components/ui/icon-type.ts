import type { ComponentType, SVGProps } from "react";

/** What a primitive takes as an icon: a lucide-react icon, or a drawing of our own with the same props. */
export type IconType = ComponentType<SVGProps<SVGSVGElement> & { size?: number | string }>;
