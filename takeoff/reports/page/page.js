"use strict";
(function () {
  const root = document.documentElement;
  const said = document.querySelector(".said");
  root.classList.add("live");

  function figure(cell) {
    return cell.dataset.v === undefined ? null : Number(cell.dataset.v);
  }

  // An absent figure stays last whichever way the column goes.
  function compare(a, b, at, byFigure, way) {
    const one = a.cells[at], two = b.cells[at];
    if (byFigure) {
      const x = figure(one), y = figure(two);
      if (x === null || y === null) { return x === y ? 0 : x === null ? 1 : -1; }
      return way * (x - y);
    }
    const x = one.textContent.trim(), y = two.textContent.trim();
    if (x === "" || y === "") { return x === y ? 0 : x === "" ? 1 : -1; }
    return way * x.localeCompare(y, undefined, { numeric: true });
  }

  function prepare(box) {
    const table = box.querySelector("table");
    const body = table.tBodies[0];
    const listed = Array.from(body.rows);
    const heads = Array.from(table.tHead.rows[0].cells);
    heads.forEach(function (head, at) {
      const button = head.querySelector("button");
      if (!button) { return; }
      const label = head.textContent.trim();
      head.addEventListener("click", function () {
        const was = head.getAttribute("aria-sort");
        const now = was === "ascending" ? "descending" : was === "descending" ? null : "ascending";
        heads.forEach(function (other) { other.removeAttribute("aria-sort"); });
        let rows = listed.slice();
        if (now) {
          head.setAttribute("aria-sort", now);
          const byFigure = rows.some(function (row) { return figure(row.cells[at]) !== null; });
          const way = now === "ascending" ? 1 : -1;
          rows.sort(function (a, b) { return compare(a, b, at, byFigure, way); });
        }
        body.append.apply(body, rows);
        said.textContent = label + ": " + (now || "as in the list");
      });
    });
    const filter = box.querySelector(".filter");
    if (!filter) { return; }
    filter.hidden = false;
    const search = filter.querySelector("input"), state = filter.querySelector("select"), count = filter.querySelector(".count");
    const words = listed.map(function (row) { return row.textContent.toLowerCase(); });
    function narrow() {
      const wanted = search.value.toLowerCase().trim(), only = state ? state.value : "";
      let left = 0;
      listed.forEach(function (row, n) {
        const show = words[n].includes(wanted) && (!only || row.dataset.state === only);
        row.hidden = !show;
        left += show ? 1 : 0;
      });
      count.textContent = left === listed.length ? listed.length + " rows" : left + " of " + listed.length + " rows; totals are of all rows";
    }
    search.addEventListener("input", narrow);
    if (state) { state.addEventListener("change", narrow); }
    box.clear = function () {
      search.value = "";
      if (state) { state.value = ""; }
      narrow();
    };
    narrow();
  }

  // A link leads to its row even where a filter hides it, and the keyboard goes on from there.
  function arrive() {
    const id = decodeURIComponent(location.hash.slice(1));
    const target = id && document.getElementById(id);
    if (!target) { return; }
    document.querySelectorAll("tr.here").forEach(function (row) { row.classList.remove("here"); });
    const box = target.closest(".tablebox");
    if (target.hidden && box && box.clear) { box.clear(); }
    if (target.tagName === "TR") { target.classList.add("here"); }
    target.scrollIntoView({ block: "center", inline: "start" });
    if (target.hasAttribute("tabindex")) { target.focus({ preventScroll: true }); }
  }

  document.querySelectorAll(".tablebox.tools").forEach(prepare);
  window.addEventListener("hashchange", arrive);
  document.addEventListener("click", function (event) {
    const link = event.target.closest && event.target.closest("a[href^='#']");
    if (link && link.getAttribute("href") === location.hash) { arrive(); }
  });
  arrive();
}());
