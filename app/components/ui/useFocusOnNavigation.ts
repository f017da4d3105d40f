import { useEffect, useRef } from "react";
import { useLocation } from "react-router";

/**
 * After a change of page the focus goes to the page's heading, which a screen reader then reads out; a change of the
 * query string or the hash alone leaves it where it is.
 */
export function useFocusOnNavigation() {
  const { pathname } = useLocation();
  const before = useRef(pathname);
  useEffect(() => {
    if (before.current === pathname) return;
    before.current = pathname;
    const heading = document.querySelector<HTMLElement>("h1");
    if (!heading) return;
    heading.tabIndex = -1;
    heading.focus({ preventScroll: true });
  }, [pathname]);
}
