/**
 * What stands around every page of a workshop: header, navigation, person menu, messages, time zone.
 *   <AppShell workshop={workshop} workshops={workshops} person={person} navigation={items} flash={flash}>
 *     <Outlet />
 *   </AppShell>
 * `focus` is for the bench: no navigation row, more room for the work. Breadcrumbs belong to the pages, which put
 * <Breadcrumbs> above their header.
 */
import { Building2, Check, ChevronsUpDown, CircleUser, LogOut, UserCog } from "lucide-react";
import type { ReactNode } from "react";
import { Form, Link } from "react-router";
import { Flash, type FlashMessage } from "../ui/flash";
import { PendingBar } from "../ui/pending-bar";
import { TimeZoneProvider } from "../ui/time";
import { NavigationBar, NavigationRow } from "./main-navigation";
import { Mark } from "./mark";
import type { NavigationItem } from "./navigation-item";
import { menuLine, PopoverMenu } from "./popover-menu";
import { SkipLink } from "./skip-link";
import { ThemeSwitch } from "./theme-switch";

export interface ShellWorkshop {
  slug: string;
  name: string;
}

export interface AppShellProps {
  workshop: ShellWorkshop & { timeZone: string; isDemo?: boolean };
  /** All workshops of the person, for the switcher. */
  workshops: readonly ShellWorkshop[];
  person: { name: string; email: string };
  /** Words such as "Inspector, builder", under the person's name. */
  roleWords?: string;
  navigation: NavigationItem[];
  flash?: FlashMessage | null;
  focus?: boolean;
  accountHref?: string;
  signOutAction?: string;
  children: ReactNode;
}

const headerButton =
  "inline-flex min-h-11 min-w-11 items-center justify-center gap-2 rounded-sm px-2 text-sm font-medium hover:bg-inset";

export function AppShell({
  workshop,
  workshops,
  person,
  roleWords,
  navigation,
  flash = null,
  focus = false,
  accountHref = "/account",
  signOutAction = "/sign-out",
  children,
}: AppShellProps) {
  const others = workshops.length > 1;
  return (
    <TimeZoneProvider timeZone={workshop.timeZone}>
      <SkipLink />
      <PendingBar />
      <header className="border-b border-rule-strong bg-sheet print:hidden">
        <div className="mx-auto flex max-w-7xl items-center gap-1 px-2 sm:px-3">
          <Link
            to={`/w/${workshop.slug}`}
            className={`${headerButton} -ml-1`}
            aria-label="Mainsgate, overview"
          >
            <Mark />
            <span className="text-lg font-bold tracking-tight max-sm:hidden">Mainsgate</span>
          </Link>
          <span aria-hidden className="h-6 w-px bg-rule-strong" />
          {others ? (
            <PopoverMenu
              place="top-left"
              triggerClass={`${headerButton} min-w-0`}
              trigger={
                <>
                  <span className="sr-only">Workshop: </span>
                  <span className="truncate">{workshop.name}</span>
                  <ChevronsUpDown aria-hidden size={16} className="shrink-0 text-ink-soft" />
                </>
              }
            >
              <p className="legend-text px-3 pt-2">Your workshops</p>
              <ul className="p-1">
                {workshops.map((one) => (
                  <li key={one.slug}>
                    <Link
                      to={`/w/${one.slug}`}
                      className={menuLine}
                      aria-current={one.slug === workshop.slug ? "true" : undefined}
                    >
                      {one.slug === workshop.slug ? (
                        <Check aria-hidden size={18} className="shrink-0 text-copper" />
                      ) : (
                        <Building2 aria-hidden size={18} className="shrink-0 text-ink-soft" />
                      )}
                      {one.name}
                    </Link>
                  </li>
                ))}
              </ul>
            </PopoverMenu>
          ) : (
            <span className="min-w-0 truncate px-2 text-sm font-medium">{workshop.name}</span>
          )}
          {workshop.isDemo ? (
            <span className="rounded-sm border border-dashed border-unknown px-1.5 text-xs font-semibold text-unknown">
              Demo<span className="max-sm:hidden">, all data invented</span>
            </span>
          ) : null}
          <div className="ml-auto">
            <PopoverMenu
              place="top-right"
              triggerClass={headerButton}
              trigger={
                <>
                  <CircleUser aria-hidden size={22} className="shrink-0" />
                  <span className="sr-only">Account of </span>
                  <span className="max-w-40 truncate max-sm:sr-only">{person.name}</span>
                </>
              }
            >
              <div className="border-b border-rule px-3 py-2">
                <p className="font-semibold">{person.name}</p>
                <p className="text-sm break-all text-ink-soft">{person.email}</p>
                {roleWords ? <p className="text-sm text-ink-soft">{roleWords}</p> : null}
              </div>
              <div className="border-b border-rule p-1">
                <Link to={accountHref} className={menuLine}>
                  <UserCog aria-hidden size={18} />
                  Account and sessions
                </Link>
              </div>
              <div className="border-b border-rule">
                <ThemeSwitch />
              </div>
              <Form method="post" action={signOutAction} className="p-1">
                <button type="submit" className={menuLine}>
                  <LogOut aria-hidden size={18} />
                  Sign out
                </button>
              </Form>
            </PopoverMenu>
          </div>
        </div>
        {focus ? null : <NavigationRow items={navigation} />}
      </header>
      <main
        id="content"
        tabIndex={-1}
        className={`mx-auto max-w-7xl px-3 pt-4 outline-none sm:px-4 sm:pb-12 print:max-w-none print:p-0 ${focus ? "pb-8" : "pb-24"}`}
      >
        <Flash message={flash} />
        {children}
      </main>
      {focus ? null : <NavigationBar items={navigation} />}
    </TimeZoneProvider>
  );
}
