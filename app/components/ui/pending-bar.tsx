/** A thin bar at the top while the next page is on its way; it shows after a quarter of a second. `<PendingBar />` */
import { useNavigation } from "react-router";

export function PendingBar() {
  const navigation = useNavigation();
  const busy = navigation.state !== "idle";
  return (
    <div
      role="status"
      className="pointer-events-none fixed inset-x-0 top-0 z-50 h-1 overflow-hidden print:hidden"
    >
      {busy ? (
        <>
          <span className="sr-only">Loading</span>
          <span aria-hidden className="pending-sweep block h-full w-1/3 bg-copper" />
        </>
      ) : null}
    </div>
  );
}
