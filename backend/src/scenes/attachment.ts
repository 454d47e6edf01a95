/** A content-disposition header that saves under a name with any letters (RFC 6266, RFC 8187). */
export function attachment(fileName: string): string {
  // eslint-disable-next-line no-control-regex -- control characters are exactly what must not reach a header
  const clean = fileName.replace(/[\u0000-\u001f\u007f/\\:*?"<>|]/g, "-").slice(0, 150);
  const plain = clean.normalize("NFKD").replace(/[^\x20-\x7e]/g, "");
  const encoded = encodeURIComponent(clean).replace(
    /['()*]/g,
    (sign) => `%${sign.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}
