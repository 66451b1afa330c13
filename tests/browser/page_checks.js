// What is wrong with the page as it is laid out now, in words. `printed`: on paper nothing can be scrolled.
(printed) => {
  const found = [];
  const name = (element) =>
    `${element.tagName.toLowerCase()}${element.id && "#"}${element.id} .${element.getAttribute("class") ?? ""}`;
  const scrolls = (element) => {
    for (let e = element; e && e !== document.body; e = e.parentElement) {
      if (["auto", "scroll", "hidden"].includes(getComputedStyle(e).overflowX)) return true;
    }
    return false;
  };
  const page = document.documentElement;
  if (page.scrollWidth > page.clientWidth) found.push(`the page is ${page.scrollWidth} wide`);

  const walker = document.createTreeWalker(document.querySelector("main"), NodeFilter.SHOW_TEXT);
  const range = document.createRange();
  while (walker.nextNode()) {
    const node = walker.currentNode;
    const parent = node.parentElement;
    if (!node.data.trim() || !parent.checkVisibility()) continue;
    if (parent.closest("thead, noscript, style, script, title, desc")) continue;
    range.selectNodeContents(node);
    const text = range.getBoundingClientRect();
    const holder = parent.closest("td, th, dd, dt, li, figure, .prose, p, pre, main");
    const edge = holder.getBoundingClientRect();
    if (!text.width || (!printed && scrolls(parent))) continue;
    const beyond = Math.max(text.right - edge.right, edge.left - text.left);
    if (beyond > 1) found.push(`"${node.data.trim().slice(0, 40)}" leaves ${name(holder)} by ${Math.ceil(beyond)}`);
  }
  if (!printed) return found;

  for (const part of document.querySelectorAll(".part, .left, .scrolls, pre")) {
    if (part.checkVisibility() && part.scrollWidth > part.clientWidth + 1) {
      const text = part.textContent.slice(0, 30);
      found.push(`"${text}" in ${name(part)} is cut: ${part.scrollWidth} in ${part.clientWidth}`);
    }
  }
  for (const whole of document.querySelectorAll("main tr:not(.drawn), main figure")) {
    if (whole.checkVisibility() && getComputedStyle(whole).breakInside !== "avoid" && !whole.closest("thead")) {
      found.push(`${name(whole)} may be split between sheets`);
    }
  }
  for (const row of document.querySelectorAll("main tbody tr")) {
    const style = getComputedStyle(row);
    const columns = style.display === "grid" ? style.gridTemplateColumns.split(" ").length : 2;
    if (row.checkVisibility() && (style.display === "block" || columns < 2)) found.push(`${name(row)} is stacked`);
  }
  for (const figure of document.querySelectorAll("main figure .narrow")) {
    if (figure.checkVisibility()) found.push(`${name(figure.parentElement)} is drawn for a phone`);
  }
  return found;
}
