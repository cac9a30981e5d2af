// what is pressed and smaller than 24 px, with another target within 12 px of its middle, or the middle of
// another small one within 24 px (WCAG 2.2, success criterion 2.5.8)
() => {
  const seen = [...document.querySelectorAll("a[href], button, summary")].filter((i) => i.getClientRects().length);
  const all = seen.map((item) => {
    const { left, top, right, bottom, width, height } = item.getBoundingClientRect();
    const middle = [(left + right) / 2, (top + bottom) / 2];
    return { item, left, top, right, bottom, middle, small: Math.min(width, height) < 24 };
  });
  const away = ({ middle: [x, y] }, other) => {
    if (other.small) return Math.hypot(x - other.middle[0], y - other.middle[1]) - 12;
    const across = Math.max(other.left - x, 0, x - other.right);
    return Math.hypot(across, Math.max(other.top - y, 0, y - other.bottom));
  };
  const tight = all.filter((one) => one.small && all.some((other) => other !== one && away(one, other) < 12));
  return tight.map(({ item }) => item.textContent);
}
