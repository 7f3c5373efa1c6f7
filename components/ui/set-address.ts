/**
 * Puts an address in place of the page's own.
 *
 * The router's own state goes with it, by which the router knows that this is no navigation: else it would give up one that is
 * under way, and a link that was pressed right after a key would lead back here.
 */
export function setAddress(address: string): void {
  window.history.replaceState(window.history.state, "", address);
}
