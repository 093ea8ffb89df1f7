import { bannerText } from '../clinical-banner.js';

const entities: Readonly<Record<string, string>> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };

export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => entities[character]!);
}

/** A whole page with the banner at its top. `body` is trusted HTML; titles are escaped. */
export function htmlPage(title: string, body: string): string {
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(title)}</title>
<style>
body{font:16px/1.5 system-ui,sans-serif;max-width:52rem;margin:0 auto;padding:1rem 1.25rem 3rem;color:#1c2321;background:#fdfdfb}
.banner{border:2px solid #8a4b08;padding:.6rem .9rem;background:#fff6e5}
h1{font-size:1.5rem}table{border-collapse:collapse}td,th{border-bottom:1px solid #cfd6d2;padding:.3rem .8rem .3rem 0;text-align:left;vertical-align:top}
code{font-family:ui-monospace,monospace}
</style>
</head>
<body>
<p class="banner" role="note">${escapeHtml(bannerText)}</p>
<h1>${escapeHtml(title)}</h1>
${body}
</body>
</html>
`;
}

export const pageHeaders = Object.freeze({
  'content-type': 'text/html; charset=utf-8',
  'content-security-policy':
    "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'none'; base-uri 'none'; form-action 'none'",
});
