/** Loads the page again, so that sums, bus and findings follow; with `typing` the form opens for the next bill. */
export function reload(typing: boolean): void {
  const { pathname } = window.location;
  window.history.replaceState(null, '', typing ? `${pathname}?typing#bill` : pathname);
  window.location.reload();
}
