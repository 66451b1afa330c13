// What pages do beyond being read: ground, addresses to copy, tables that sort and filter, search.
"use strict";

const element = (name, properties = {}, ...children) => {
  const made = Object.assign(document.createElement(name), properties);
  made.append(...children);
  return made;
};

// Storage may be forbidden to pages opened from disk.
const remembered = {
  get: (key) => { try { return localStorage.getItem(key); } catch { return null; } },
  set: (key, value) => { try { localStorage.setItem(key, value); } catch { /* forgotten */ } },
};

function chooseGround() {
  const root = document.documentElement;
  const kept = remembered.get("calcgen-ground");
  if (kept) root.dataset.ground = kept;
  const dark = () => root.dataset.ground
    ? root.dataset.ground === "dark"
    : matchMedia("(prefers-color-scheme: dark)").matches;
  const button = element("button", { type: "button" });
  const label = () => { button.textContent = dark() ? "light ground" : "dark ground"; };
  button.addEventListener("click", () => {
    root.dataset.ground = dark() ? "light" : "dark";
    remembered.set("calcgen-ground", root.dataset.ground);
    label();
  });
  label();
  document.querySelector(".find").append(button);
}

function copyAddresses() {
  document.addEventListener("click", (event) => {
    const link = event.target.closest("a.address");
    if (!link || !navigator.clipboard) return;
    navigator.clipboard.writeText(link.href).then(() => {
      link.textContent = "copied";
      setTimeout(() => { link.textContent = "#"; }, 1200);
    }, () => {});
  });
}

const orderOf = (row, column) => {
  const cell = row.cells[column];
  return cell.dataset.order ?? cell.textContent.trim();
};

const compare = (a, b) => {
  const [x, y] = [Number(a), Number(b)];
  if (a !== "" && b !== "" && !Number.isNaN(x) && !Number.isNaN(y)) return x - y;
  return a.localeCompare(b, undefined, { numeric: true });
};

function sortable(table) {
  const body = table.tBodies[0];
  if (body.rows.length < 2) return;
  const buttons = [...table.tHead.rows[0].cells].map((head, column) => {
    const button = element("button", { type: "button", className: "sort" }, ...head.childNodes);
    button.addEventListener("click", () => {
      const descending = head.getAttribute("aria-sort") === "ascending";
      for (const other of table.tHead.rows[0].cells) other.removeAttribute("aria-sort");
      for (const other of buttons) other.setAttribute("aria-pressed", "false");
      head.setAttribute("aria-sort", descending ? "descending" : "ascending");
      button.setAttribute("aria-pressed", "true");
      const rows = [...body.rows].sort((a, b) => compare(orderOf(a, column), orderOf(b, column)));
      body.append(...(descending ? rows.reverse() : rows));
    });
    head.replaceChildren(button);
    return button;
  });
}

// Letters without accents, Greek and Latin alike in lower case.
const folded = (text) => text.normalize("NFKD").replace(/\p{M}/gu, "").toLowerCase();
const wordsOf = (text) => folded(text).split(/\s+/).filter(Boolean);

function filterable(table) {
  const rows = [...table.tBodies[0].rows];
  if (rows.length < 2) return;
  const input = element("input", { type: "search", autocomplete: "off" });
  const count = element("span", {}, `${rows.length} rows`);
  count.setAttribute("role", "status");
  const texts = new Map(rows.map((row) => [row, folded(row.textContent)]));
  input.addEventListener("input", () => {
    const words = wordsOf(input.value);
    let shown = 0;
    for (const row of rows) {
      row.hidden = !words.every((word) => texts.get(row).includes(word));
      row.style.display = row.hidden ? "none" : "";
      shown += row.hidden ? 0 : 1;
    }
    count.textContent = `${shown} of ${rows.length} rows`;
  });
  table.before(element("div", { className: "filter" }, element("label", {}, "Filter ", input), count));
}

const ORDER = ["calc", "error", "value", "check", "input", "section", "beam", "stress", "assumption", "figure", "result"];
const MOST = 80;

function found(index, words) {
  const rank = (kind) => (ORDER.includes(kind) ? ORDER.indexOf(kind) : ORDER.length);
  return index
    .map(([href, kind, heading, text]) => ({ href, kind, heading, text, head: folded(heading) }))
    .filter((entry) => {
      const all = `${entry.head} ${entry.kind} ${folded(entry.text)} ${folded(decodeURI(entry.href))}`;
      return words.every((word) => all.includes(word));
    })
    .sort((a, b) => {
      const inHead = (entry) => (words.every((word) => entry.head.includes(word)) ? 0 : 1);
      return inHead(a) - inHead(b) || rank(a.kind) - rank(b.kind);
    });
}

// The text around the first word sought, with the words marked.
function excerpt(text, words) {
  const low = text.toLowerCase();
  const at = Math.max(0, Math.min(...words.map((word) => low.indexOf(word)).filter((i) => i >= 0), low.length) - 60);
  const piece = `${at > 0 ? "… " : ""}${text.slice(at, at + 180)}${text.length > at + 180 ? " …" : ""}`;
  const parts = [];
  let rest = piece;
  while (rest) {
    const next = words
      .map((word) => [rest.toLowerCase().indexOf(word), word.length])
      .filter(([place]) => place >= 0)
      .sort((a, b) => a[0] - b[0])[0];
    if (!next) break;
    parts.push(rest.slice(0, next[0]), element("mark", {}, rest.slice(next[0], next[0] + next[1])));
    rest = rest.slice(next[0] + next[1]);
  }
  return [...parts, rest];
}

function search() {
  const results = document.getElementById("search-results");
  if (!results || !window.calcgenIndex) return;
  const input = document.getElementById("find-words");
  const show = () => {
    const words = wordsOf(input.value);
    const entries = words.length ? found(window.calcgenIndex, words) : [];
    const count = document.getElementById("search-count");
    count.textContent = words.length
      ? `${entries.length} found${entries.length > MOST ? `, the first ${MOST} shown` : ""}`
      : "Write a name, a word or a number above.";
    results.replaceChildren(...entries.slice(0, MOST).map((entry) => element("li", {},
      element("span", { className: "kind" }, entry.kind),
      element("a", { href: entry.href }, entry.heading),
      element("span", { className: "number" }, ` ${decodeURI(entry.href).split("#")[0].replace(".html", "")}`),
      element("p", {}, ...excerpt(entry.text, words)))));
  };
  input.value = new URLSearchParams(location.search).get("q") ?? "";
  input.addEventListener("input", () => {
    show();
    history.replaceState(null, "", `?q=${encodeURIComponent(input.value)}`);
  });
  show();
}

chooseGround();
copyAddresses();
for (const table of document.querySelectorAll("table.sortable")) {
  sortable(table);
  filterable(table);
}
addEventListener("DOMContentLoaded", search);
