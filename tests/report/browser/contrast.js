// text of less contrast than 4.5 to what lies behind it (WCAG 2.1, success criterion 1.4.3), and how many were read
() => {
  const parse = (css) => {
    const found = css.match(/[\d.]+/g)?.map(Number);
    return !found || css === "none" ? [0, 0, 0, 0] : [found[0], found[1], found[2], found[3] ?? 1];
  };
  const over = (top, below) => [0, 1, 2].map((k) => top[k] * top[3] + below[k] * (1 - top[3]));
  const linear = (c) => ((c /= 255) <= 0.03928 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4);
  const luminance = ([r, g, b]) => 0.2126 * linear(r) + 0.7152 * linear(g) + 0.0722 * linear(b);
  const contrast = (a, b) => {
    const [low, high] = [luminance(a), luminance(b)].sort((p, q) => p - q);
    return (high + 0.05) / (low + 0.05);
  };
  const ancestors = (item) => (item ? [item, ...ancestors(item.parentElement)] : []);
  const opacity = (item) => ancestors(item).reduce((all, i) => all * getComputedStyle(i).opacity, 1);
  const colour = (item, key, share) => {
    const [r, g, b, a] = parse(getComputedStyle(item)[key]);
    return [r, g, b, a * share * opacity(item)];
  };
  const paper = (item) =>
    ancestors(item).reduceRight((below, i) => over(parse(getComputedStyle(i).backgroundColor), below), [255, 255, 255]);
  // behind the middle of a text of a figure: the card and every shape that is filled there
  const painted = (text) => {
    const { left, top, width, height } = text.getBoundingClientRect();
    const stack = document.elementsFromPoint(left + width / 2, top + height / 2);
    const shapes = stack.slice(stack.indexOf(text) + 1).filter((i) => i.closest("svg") && i.tagName !== "svg");
    const fills = shapes.map((i) => colour(i, "fill", getComputedStyle(i).fillOpacity));
    return fills.reduceRight((below, fill) => over(fill, below), paper(text.closest(".card")));
  };
  const faults = [];
  let read = 0;
  for (const item of document.querySelectorAll("body *:not(script, title)")) {
    const own = [...item.childNodes].some((node) => node.nodeType === 3 && node.textContent.trim());
    if (!own || !item.getClientRects().length) continue;
    const text = item.closest("svg text");
    const ground = text ? painted(text) : paper(item);
    const ratio = contrast(over(colour(item, text ? "fill" : "color", 1), ground), ground);
    if (ratio < 4.5) faults.push(`${item.textContent.trim().slice(0, 40)}: ${ratio.toFixed(2)}`);
    read += 1;
  }
  return [faults, read];
}
