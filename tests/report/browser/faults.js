// what lies on something else, or leaves the page, outside of frames that scroll
() => {
  const seen = (item) => item.getClientRects().length > 0;
  const box = (item) => item.getBoundingClientRect();
  const found = [];
  const blocks = "body, main, header, section, .part, .pictures, .controls, figure";
  for (const parent of document.querySelectorAll(blocks)) {
    const items = [...parent.children].filter((i) => seen(i) && getComputedStyle(i).position !== "fixed");
    items.filter((i) => !i.matches("nav, .side")).forEach((a, at, kept) => kept.slice(at + 1).forEach((b) => {
      const p = box(a), q = box(b);
      const wide = Math.min(p.right, q.right) - Math.max(p.left, q.left);
      const high = Math.min(p.bottom, q.bottom) - Math.max(p.top, q.top);
      if (wide > 1 && high > 1) found.push(`${a.className || a.tagName} on ${b.className || b.tagName}`);
    }));
  }
  const width = document.documentElement.clientWidth;
  for (const item of document.querySelectorAll("main *, .controls *")) {
    if (!seen(item) || item.closest("svg") || item.parentElement.closest(".scroll, pre")) continue;
    if (box(item).right > width + 1) found.push(`${item.tagName} leaves the page`);
  }
  if (document.documentElement.scrollWidth > width) found.push("page scrolls");
  return found;
}
