/** A message as the page and the tests read it. */
export interface ReadMessage {
  id: string;
  /** ISO 8601, UTC. */
  date: string;
  from: string;
  to: string;
  subject: string;
  messageId: string;
  text: string;
  html: string;
}

/** All messages as a table, newest first. */
export function listPage(messages: readonly ReadMessage[]): string {
  const rows = messages.map(
    (message) => `<tr>
      <td><time datetime="${escape(message.date)}">${escape(message.date.slice(0, 19).replace("T", " "))}</time></td>
      <td>${escape(message.to)}</td>
      <td><a href="/messages/${escape(message.id)}">${escape(message.subject)}</a></td></tr>`,
  );
  const table = `<table><thead><tr><th>Sent (UTC)</th><th>To</th><th>Subject</th></tr></thead><tbody>${rows.join("")}</tbody></table>`;
  return page(
    "Outgoing mail",
    messages.length === 0 ? "<p>No mail has been sent yet.</p>" : table,
    "Every message that this installation would have sent. Nothing leaves this machine.",
  );
}

/** One message: heads, text, and its HTML in a frame that may run nothing. */
export function messagePage(message: ReadMessage): string {
  const heads = [
    ["From", message.from],
    ["To", message.to],
    ["Sent (UTC)", message.date],
    ["Message-ID", message.messageId],
  ].map(([name = "", value = ""]) => `<dt>${name}</dt><dd>${escape(value)}</dd>`);
  return page(
    message.subject,
    `<p><a href="/">All messages</a> · <a href="/messages/${escape(message.id)}.eml">Source</a></p>
    <dl>${heads.join("")}</dl>
    <h2>Text</h2><pre>${linked(message.text)}</pre>
    ${message.html === "" ? "" : `<h2>HTML</h2><iframe title="The message's HTML" sandbox="allow-popups allow-popups-to-escape-sandbox" srcdoc="${escape(`<base target="_blank">${message.html}`)}"></iframe>`}`,
  );
}

function page(title: string, body: string, lead = ""): string {
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width">
<title>${escape(title)}</title><link rel="icon" href="data:,"><style>
:root { color-scheme: light dark; font: 16px/1.5 system-ui, sans-serif }
body { max-width: 60rem; margin: 2rem auto; padding: 0 1rem }
table { border-collapse: collapse; width: 100% } th, td { text-align: left; padding: .5rem; border-bottom: 1px solid #8886 }
dl { display: grid; grid-template-columns: max-content 1fr; gap: .25rem 1rem } dd { margin: 0 }
pre { white-space: pre-wrap; overflow-wrap: anywhere; border: 1px solid #8886; padding: 1rem }
iframe { width: 100%; height: 30rem; border: 1px solid #8886; background: #fff }
</style></head><body><h1>${escape(title)}</h1>${lead === "" ? "" : `<p>${lead}</p>`}${body}</body></html>`;
}

/** Escapes the text and makes its web addresses clickable. */
function linked(text: string): string {
  return escape(text).replace(/https?:\/\/[^\s<>"]+/g, (url) => `<a href="${url}" rel="noopener">${url}</a>`);
}

function escape(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);
}
