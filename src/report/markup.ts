/** Text inside HTML, SVG and MathML. */
export function escapeMarkup(text: string): string {
  return text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
}
