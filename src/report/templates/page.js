"use strict";
// Sorting: the buttons in the heads of a table order its rows; missing values always come last.
for (const table of document.querySelectorAll("table.sortable")) {
  const heads = [...table.tHead.rows[0].cells];
  const body = table.tBodies[0];
  const rows = [...body.rows];
  heads.forEach((head, column) => {
    const button = head.querySelector("button");
    if (!button) return;
    button.addEventListener("click", () => {
      const down = head.getAttribute("aria-sort") === "ascending";
      heads.forEach((h) => h.removeAttribute("aria-sort"));
      head.setAttribute("aria-sort", down ? "descending" : "ascending");
      const value = (row) => row.cells[column].dataset.v;
      const numeric = rows.every((r) => value(r) === "" || Number.isFinite(Number(value(r))));
      const compare = (a, b) => (numeric ? Number(a) - Number(b) : a.localeCompare(b));
      const sorted = rows.slice().sort((ra, rb) => {
        const a = value(ra), b = value(rb);
        if (a === "" || b === "") return (a === "") - (b === "");
        return down ? compare(b, a) : compare(a, b);
      });
      body.append(...sorted);
      const status = document.getElementById("sorted");
      if (status) status.textContent = "Sorted by " + button.textContent.toLowerCase() + (down ? ", highest first." : ", lowest first.");
    });
  });
}

// The play viewer: moves both dots, the line of sight between them and the cursors in the charts.
function startViewer(pursuit) {
  const viewer = pursuit.querySelector(".viewer");
  if (!viewer) return;
  const data = JSON.parse(viewer.querySelector("script").textContent);
  const controls = viewer.querySelector(".controls");
  const slider = controls.querySelector("input");
  const readout = controls.querySelector("output");
  const run = controls.querySelector(".run");
  const field = viewer.querySelector("svg");
  const dots = [[field.querySelector(".dot-carrier"), data.c], [field.querySelector(".dot-defender"), data.d]];
  const sight = document.createElementNS(field.namespaceURI, "line");
  sight.setAttribute("class", "sight-now");
  const firstDot = field.querySelector(".dot");
  if (firstDot) firstDot.before(sight);
  const cursors = [...pursuit.querySelectorAll(".cursor")].map((c) => [c, c.getAttribute("d").split("V")[1]]);
  const labels = [...field.querySelectorAll(".label")];
  const [left, right, span] = data.axis;
  const say = (word, value, unit) => (value === null ? "" : " · " + word + " " + value + unit);
  let timer = null;

  function show(i) {
    slider.value = i;
    labels.forEach((l) => { l.style.display = i === 0 ? "" : "none"; });
    for (const [dot, spots] of dots) {
      if (!dot) continue;
      const [x, y] = spots[i];
      dot.style.visibility = x === null ? "hidden" : "visible";
      if (x !== null) { dot.setAttribute("cx", x); dot.setAttribute("cy", y); }
    }
    const whole = dots.every(([, spots]) => spots[i][0] !== null);
    sight.style.visibility = whole ? "visible" : "hidden";
    if (whole) {
      ["x1", "y1"].forEach((a, k) => sight.setAttribute(a, data.d[i][k]));
      ["x2", "y2"].forEach((a, k) => sight.setAttribute(a, data.c[i][k]));
    }
    const t = data.t[i];
    if (t !== null) {
      const x = (left + Math.min(Math.max(t / span, 0), 1) * (right - left)).toFixed(1);
      for (const [cursor, foot] of cursors) cursor.setAttribute("d", "M" + x + " 4V" + foot);
    }
    const words = (t === null ? "–" : t.toFixed(1)) + " s" + say("gap", data.gap[i], " yd") + say("needs", data.need[i], " mph") +
      say("runs", data.runs[i], " mph") + say("chance", data.chance[i], " %");
    readout.textContent = words;
    slider.setAttribute("aria-valuetext", words);
  }
  const last = data.t.length - 1;
  const step = (by) => show(Math.min(Math.max(Number(slider.value) + by, 0), last));
  function stop() { clearTimeout(timer); timer = null; run.textContent = "Play"; }
  function next() {
    const i = Number(slider.value);
    if (i >= last) return stop();
    const wait = data.t[i + 1] === null || data.t[i] === null ? 0.1 : data.t[i + 1] - data.t[i];
    timer = setTimeout(() => { step(1); next(); }, 1000 * wait);
  }
  controls.querySelector(".back").addEventListener("click", () => { stop(); step(-1); });
  controls.querySelector(".on").addEventListener("click", () => { stop(); step(1); });
  slider.addEventListener("input", () => { stop(); show(Number(slider.value)); });
  run.addEventListener("click", () => {
    if (timer !== null) return stop();
    if (Number(slider.value) >= last) show(0);
    run.textContent = "Pause";
    next();
  });
  pursuit.addEventListener("toggle", () => { if (!pursuit.open) stop(); });
  controls.hidden = false;
  pursuit.classList.add("live");
  show(0);
}
document.querySelectorAll(".pursuit").forEach(startViewer);

// A link to a closed pursuit opens it.
function openTarget() {
  const id = location.hash.slice(1);
  const target = id && document.getElementById(id);
  if (target && target.tagName === "DETAILS") { target.open = true; target.scrollIntoView(); }
}
addEventListener("hashchange", openTarget);
for (const link of document.querySelectorAll("a[href^='#pursuit-']")) link.addEventListener("click", () => setTimeout(openTarget));
openTarget();
