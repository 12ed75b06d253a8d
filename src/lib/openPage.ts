/** Leaves the app for a page of the same site that is not one of its routes, such as the stub. */
export function openPage(path: string): void {
  window.location.assign(path);
}
