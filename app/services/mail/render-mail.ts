export interface MailContent {
  subject: string;
  /** Salutation's name. */
  toName: string;
  /** Plain paragraphs. */
  paragraphs: readonly string[];
  /** The one thing to do, if there is one; absolute address. */
  link?: { label: string; href: string };
  /** Closes the mail: workshop's name, and that it is a demo where it is. */
  from: string;
}

/** A mail's text and HTML, from the same words. */
export function renderMail(content: MailContent): { text: string; html: string } {
  const { toName, paragraphs, link, from } = content;
  const text = [
    `Hello ${toName},`,
    ...paragraphs,
    ...(link ? [`${link.label}:\n${link.href}`] : []),
    `— ${from}`,
  ].join("\n\n");
  const html = [
    `<!doctype html><html lang="en"><body style="font-family:'Public Sans',Arial,sans-serif;color:#1d2733;max-width:36em;margin:1.5em auto;padding:0 1em;line-height:1.5">`,
    `<p>Hello ${escapeHtml(toName)},</p>`,
    ...paragraphs.map((paragraph) => `<p>${escapeHtml(paragraph)}</p>`),
    ...(link
      ? [
          `<p><a href="${escapeHtml(link.href)}" style="display:inline-block;background:#8a4b22;color:#ffffff;padding:0.6em 1.1em;text-decoration:none">${escapeHtml(link.label)}</a></p>`,
          `<p style="font-size:0.85em">${escapeHtml(link.href)}</p>`,
        ]
      : []),
    `<p style="border-top:1px solid #c9c2b4;padding-top:0.8em;font-size:0.9em">${escapeHtml(from)}</p></body></html>`,
  ].join("\n");
  return { text, html };
}

function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}
