/** Always a download, never shown in the page; the name once in plain ASCII and once as it is (RFC 6266, RFC 8187). */
export function contentDisposition(fileName: string): string {
  const plain = fileName
    .normalize('NFKD')
    .replace(/[^\x20-\x7e]/g, '_')
    .replace(/["\\%]/g, '_');
  const exact = encodeURIComponent(fileName).replace(/['()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`);
  return `attachment; filename="${plain}"; filename*=UTF-8''${exact}`;
}
