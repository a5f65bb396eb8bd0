import { apiWorkshopMiddleware } from "~/middleware/workshop.server";
import type { Route } from "./+types/workshop";

/** Stands before every API route of a workshop; answers nothing by itself. */
export const middleware: Route.MiddlewareFunction[] = [apiWorkshopMiddleware];
