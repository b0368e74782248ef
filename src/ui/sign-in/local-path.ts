/** A path of this application, or the start page: an address from a link must not lead elsewhere. */
export function localPath(wanted: string | undefined): string {
  const isLocal = wanted !== undefined && /^\/(?![/\\])[^\\\u0000-\u001f]*$/.test(wanted) && !wanted.startsWith("/sign-in");
  return isLocal ? wanted : "/";
}
