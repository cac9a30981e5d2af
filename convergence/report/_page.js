"use strict";
// What the controls of the page do. Without this script everything is there, one below the other.
{
  const root = document.documentElement;
  const all = (what, where = document) => [...where.querySelectorAll(what)];
  const isPressed = (button) => button.getAttribute("aria-pressed") === "true";
  const press = (button, on) => button.setAttribute("aria-pressed", on);

  // light and dark: as the system says until the switch is used
  const system = matchMedia("(prefers-color-scheme: dark)");
  const dark = document.querySelector("[data-switch=dark]");
  const isDark = () => (root.dataset.scheme ? root.dataset.scheme === "dark" : system.matches);
  const showScheme = () => press(dark, isDark());
  const turnScheme = () => {
    root.dataset.scheme = isDark() ? "light" : "dark";
    showScheme();
  };

  // verdicts: what has none but those that are off is hidden, on the screen only
  const filters = all("[data-show]");
  const note = document.querySelector("[role=status]");
  const reset = document.querySelector("[data-reset]");
  const parts = all(".part");
  const told = parts.length ? parts : all("tr[data-verdict]");
  const filter = () => {
    const off = filters.filter((button) => !isPressed(button)).map((button) => button.dataset.show);
    for (const item of all("[data-verdict]")) {
      const words = item.dataset.verdict.split("|");
      item.classList.toggle("filtered", words.every((word) => off.includes(word)));
    }
    const shown = told.filter((item) => !item.classList.contains("filtered")).length;
    note.textContent = off.length ? `${shown} of ${told.length} shown` : "";
    if (!off.length && document.activeElement === reset) filters[0].focus();
    reset.hidden = !off.length;
  };
  const turnFilter = (button) => {
    if (!button) return;
    press(button, !isPressed(button));
    filter();
  };
  const showAll = () => {
    if (!filters.length) return;
    filters.forEach((button) => press(button, true));
    filter();
  };

  // the axis of the figures; what is being looked at stays in its place
  const axes = ["both", "value", "error"];
  const showAxis = (name, fixed) => {
    const before = fixed.getBoundingClientRect().top;
    root.dataset.axis = name;
    for (const button of all("[data-axis-of]")) press(button, button.dataset.axisOf === name);
    scrollBy({ top: fixed.getBoundingClientRect().top - before, behavior: "instant" });
  };
  const nextAxis = () => {
    const middle = all(".axis, h3").filter(isSeen).find((item) => edge(item) > 0);
    const next = (axes.indexOf(root.dataset.axis ?? "both") + 1) % axes.length;
    showAxis(axes[next], middle ?? root);
  };

  // where the reader is, and the way to the next heading
  const sections = all("h2");
  const quantities = all(".part > h3");
  const isSeen = (item) => item.getClientRects().length > 0;
  const edge = (item) => item.getBoundingClientRect().top - parseFloat(getComputedStyle(item).scrollMarginTop);
  const go = (headings, forward) => {
    const seen = headings.filter(isSeen);
    const next = forward ? seen.find((item) => edge(item) > 5) : seen.findLast((item) => edge(item) < -5);
    if (!next) return;
    next.scrollIntoView({ behavior: "instant" });
    next.focus({ preventScroll: true });
  };
  const bar = document.querySelector("nav");
  const links = all("nav a[href^='#']");
  const targets = links.map((link) => document.getElementById(link.hash.slice(1)));
  const showPlace = () => {
    const at = targets.findLastIndex((item) => isSeen(item) && edge(item) <= 40);
    const link = links[Math.max(at, 0)];
    if (link.hasAttribute("aria-current")) return;
    for (const other of links) other.removeAttribute("aria-current");
    link.setAttribute("aria-current", "true");
    bar.scrollTo(link.offsetLeft - bar.clientWidth / 2, link.offsetTop - bar.clientHeight / 2);
  };

  // what a mark of a figure is, at the pointer or the focus; arrows go from mark to mark
  const hint = document.createElement("div");
  hint.className = "hint";
  hint.setAttribute("role", "tooltip");
  hint.hidden = true;
  document.body.append(hint);
  let hinted = null;
  const hideHint = () => {
    hinted = null;
    hint.hidden = true;
  };
  const showHint = (level) => {
    hinted = level;
    hint.textContent = level.getAttribute("aria-label");
    hint.hidden = false;
    const { left, top, bottom, width } = level.getBoundingClientRect();
    const most = root.clientWidth - hint.offsetWidth - 8;
    const above = top - hint.offsetHeight - 4;
    hint.style.left = `${Math.max(8, Math.min(left + width / 2 - hint.offsetWidth / 2, most))}px`;
    hint.style.top = `${above < 60 ? bottom + 4 : above}px`;
  };
  const step = (levels, at, key) => {
    const next = levels[at + (key === "ArrowRight" ? 1 : -1)];
    if (!next) return;
    levels.forEach((level) => (level.tabIndex = level === next ? 0 : -1));
    next.focus();
  };
  for (const figure of all("figure")) {
    const levels = all(".level", figure);
    levels.forEach((level, at) => {
      const title = level.querySelector("title");
      level.setAttribute("aria-label", title.textContent);
      title.remove();
      level.tabIndex = at ? -1 : 0;
      level.addEventListener("pointerenter", () => showHint(level));
      level.addEventListener("focus", () => showHint(level));
      level.addEventListener("pointerleave", hideHint);
      level.addEventListener("blur", hideHint);
      level.addEventListener("keydown", (event) => {
        if (!event.key.match(/^Arrow(Left|Right)$/)) return;
        event.preventDefault();
        step(levels, at, event.key);
      });
    });
  }

  // keys
  const keys = document.querySelector("[data-switch=keys]");
  const help = document.querySelector(".keys");
  const turnKeys = () => {
    press(keys, !isPressed(keys));
    help.hidden = !isPressed(keys);
  };
  const actions = {
    n: () => go(sections, true),
    p: () => go(sections, false),
    j: () => go(quantities, true),
    k: () => go(quantities, false),
    x: nextAxis,
    d: turnScheme,
    0: showAll,
  };
  addEventListener("keydown", (event) => {
    if (event.key === "Escape") hideHint();
    if (event.ctrlKey || event.altKey || event.metaKey || !isPressed(keys)) return;
    if (/^[1-9]$/.test(event.key)) turnFilter(filters[event.key - 1]);
    else actions[event.key]?.();
  });

  addEventListener("click", ({ target }) => {
    const button = target.closest("button");
    if (button?.dataset.show) turnFilter(button);
    else if (button?.dataset.axisOf) showAxis(button.dataset.axisOf, button);
    else if (button === reset) showAll();
    else if (button === dark) turnScheme();
    else if (button === keys) turnKeys();
  });
  addEventListener("scroll", showPlace, { passive: true });
  addEventListener("scroll", () => hinted && showHint(hinted), { passive: true });
  addEventListener("resize", showPlace);
  system.addEventListener("change", showScheme);
  [...sections, ...quantities].forEach((heading) => (heading.tabIndex = -1));
  all(".controls, .axis").forEach((control) => (control.hidden = false));
  showScheme();
  showPlace();
}
