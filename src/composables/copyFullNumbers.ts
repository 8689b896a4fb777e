/** Text of a copied fragment, cells apart by tabs and rows by lines. */
function plainText(fragment: DocumentFragment): string {
  for (const cell of fragment.querySelectorAll("td + td, th + td, td + th, th + th, dd")) cell.prepend("\t");
  for (const row of fragment.querySelectorAll("tr + tr, [role=row] + [role=row], dt, p, h1, h2, li")) row.prepend("\n");
  return (fragment.textContent ?? "").replace(/[ \u202f\u00a0]+/g, " ").trim();
}

/** On copy, a shortened number becomes the full binary64 value that it stands for. */
export function copyFullNumbers(event: ClipboardEvent): void {
  const selection = document.getSelection();
  if (!selection || selection.isCollapsed || selection.rangeCount === 0) return;
  const range = selection.getRangeAt(0);
  const start = range.commonAncestorContainer;
  const inside = (start instanceof Element ? start : start.parentElement)?.closest<HTMLElement>("[data-full]");
  if (inside) {
    event.clipboardData?.setData("text/plain", inside.dataset.full ?? "");
    event.preventDefault();
    return;
  }
  const fragment = range.cloneContents();
  const numbers = fragment.querySelectorAll<HTMLElement>("[data-full]");
  if (numbers.length === 0) return;
  for (const number of numbers) number.textContent = number.dataset.full ?? "";
  event.clipboardData?.setData("text/plain", plainText(fragment));
  event.preventDefault();
}
