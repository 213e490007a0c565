// The views: tabs, choices, the diagram with its card, tables, and the code that makes the same thing.

const CARD = "Point at an arrow or a row, or move to it with the Tab key, to read its equation, basis, source and what makes " +
  "its uncertainty. Click it or press Enter to go to its line.";

const SMALLEST = 0.66; // smallest scale at which a diagram is shown

function makePage(client, send, goTo, write) {
  const tabs = h("div", { class: "rhd-tabs", role: "tablist", "aria-label": "Questions" });
  const question = h("h3", { class: "rhd-question" });
  const controls = h("div", { class: "rhd-controls" });
  const moves = makeMoves(send, () => write(payload.write));
  const status = h("div", { class: "rhd-status", role: "status", tabindex: "-1" });
  const figure = h("div", { class: "rhd-figure" });
  const card = h("div", { class: "rhd-card", "aria-live": "off" });
  const problem = h("div", { class: "rhd-problem", role: "alert" });
  const explore = h("button", { type: "button", class: "rhd-button rhd-explore", "aria-expanded": "false" });
  const slot = h("div", { class: "rhd-plotly" });
  const empty = h("p", { class: "rhd-empty" });
  const tables = h("div", { class: "rhd-tables" });
  const code = h("pre", { class: "rhd-code", tabindex: "0", "aria-label": "Code for this view" });
  const copy = h("button", { type: "button", class: "rhd-button" }, "Copy");
  const noCode = h("p", { class: "rhd-empty" },
    "While a line is broken there is no code for this picture: it is made of earlier lines too.");
  const saving = h("pre", { class: "rhd-code rhd-saving", tabindex: "0", "aria-label": "Code that saves files" });
  const savingWords = h("p", { class: "rhd-empty" }, "And to save it in files, after that:");
  const twin = h("details", { class: "rhd-twin-code" }, h("summary", {}, "Code that makes the same in a cell"),
    copy, code, noCode, savingWords, saving);
  const search = h("input", { type: "search", size: "24", placeholder: "label, formula, source …" });
  const found = h("span", { class: "rhd-hint", role: "status" });
  const searching = h("div", { class: "rhd-search", role: "search" }, h("label", {}, h("span", {}, "Search"), search),
    found);
  const panel = h("div", { class: "rhd-panel", role: "tabpanel", id: `rhd-panel-${client}`, tabindex: "0" },
    question, controls, moves.el, status, problem, empty, figure, explore, slot, searching, tables, twin);
  // keys pressed here are for the desk: the notebook's one-letter shortcuts would delete or run cells
  const el = h("section", { class: "rhd-views", "aria-label": "Views", "data-lm-suppress-shortcuts": "true" },
    tabs, panel, card);

  const shown = {};
  let payload = null;

  function changed(key, value) {
    const text = JSON.stringify(value);
    if (shown[key] === text) return false;
    shown[key] = text;
    return true;
  }

  function drawTabs() {
    if (!changed("tabs", [payload.tabs, payload.view])) return;
    const focused = tabs.contains(el.getRootNode().activeElement);
    tabs.replaceChildren(...payload.tabs.map(([key, name]) => h("button", {
      type: "button", role: "tab", id: `rhd-tab-${key}-${client}`, "aria-selected": String(key === payload.view),
      "aria-controls": panel.id, tabindex: key === payload.view ? "0" : "-1", "data-view": key,
      onclick: () => send({ kind: "option", key: "view", value: key }),
    }, name)));
    panel.setAttribute("aria-labelledby", `rhd-tab-${payload.view}-${client}`);
    if (focused) tabs.querySelector("[tabindex='0']").focus({ preventScroll: true });
  }

  tabs.addEventListener("keydown", (event) => {
    const all = [...tabs.children];
    const at = all.indexOf(event.target);
    const step = { ArrowRight: 1, ArrowLeft: -1, Home: -at, End: all.length - 1 - at }[event.key];
    if (at < 0 || step === undefined) return;
    event.preventDefault();
    const next = all[(at + step + all.length) % all.length];
    next.focus({ preventScroll: true });
    next.click();
  });

  function drawControls() {
    const shape = payload.controls.map(({ value, hint, ...rest }) => rest);
    if (changed("controls", [payload.view, shape])) {
      const active = el.getRootNode().activeElement;
      const held = panel.contains(active) ? active.dataset : {};
      controls.replaceChildren(...payload.controls.filter((c) => !c.moves).map((c) => makeControl(c, send)));
      moves.rows.replaceChildren(...payload.controls.filter((c) => c.moves).map((c) => makeControl(c, send)));
      const again = held.key ? `[data-key='${held.key}']` : held.slide ? `[data-slide='${held.slide}']` : "";
      if (again) panel.querySelector(again)?.focus({ preventScroll: true });
    }
    for (const control of payload.controls) setControl(panel, control);
    moves.el.hidden = !payload.controls.some((control) => control.moves);
    moves.update(payload.write);
  }

  function drawStatus() {
    panel.classList.toggle("rhd-kept", payload.kept.length > 0);
    const words = [...payload.kept, ...payload.left_out].join(" ");
    if (changed("status", [words, Boolean(payload.write)])) {
      status.textContent = words || (payload.write ? "With moved values; the text is unchanged." : "Up to date with the text.");
      status.classList.toggle("rhd-quiet", !words && !payload.write);
    }
    const wrong = [payload.error && `Something went wrong: ${payload.error}`, ...payload.problem].filter(Boolean);
    if (changed("problem", wrong)) {
      problem.replaceChildren(...wrong.map((line) => h("p", {}, line)));
      problem.hidden = !wrong.length;
    }
  }

  // A native tooltip would cover the arrow that it explains: its text is read in the card, and by screen readers.
  function speakTitles() {
    for (const node of figure.querySelectorAll("svg, .rh-arrow")) {
      const title = node.querySelector(":scope > title");
      if (!title) continue;
      node.dataset.said = title.textContent;
      node.setAttribute("aria-label", title.textContent.replaceAll("\n", "; "));
      title.remove();
      // a wide diagram shrinks to the pane as far as its text stays readable, and scrolls from there on
      if (node.tagName === "svg") node.style.minWidth = `${SMALLEST * node.getAttribute("width")}px`;
      if (node.classList.contains("rh-arrow")) node.setAttribute("role", "button");
    }
  }

  const nameOf = (arrow) => `${arrow.dataset.column}\n${arrow.dataset.label}`;

  function drawFigure() {
    if (!changed("svg", [payload.svg, payload.more_svg])) return;
    const active = el.getRootNode().activeElement;
    const held = figure.contains(active) ? nameOf(active) : "";
    const left = figure.scrollLeft;
    figure.innerHTML = [payload.svg, ...payload.more_svg].join(""); // made by the library, which escapes every string
    speakTitles();
    figure.scrollLeft = left;
    figure.hidden = card.hidden = explore.hidden = !payload.svg;
    const arrows = [...figure.querySelectorAll(".rh-arrow")];
    const same = arrows.find((arrow) => nameOf(arrow) === held);
    if (same) same.focus({ preventScroll: true });
    else tell(arrows.find((arrow) => nameOf(arrow) === card.dataset.name));
  }

  function tell(arrow) {
    card.dataset.name = arrow ? nameOf(arrow) : "";
    if (!arrow) {
      card.replaceChildren(h("p", { class: "rhd-hint" }, CARD));
      return;
    }
    const [first, ...rest] = (arrow.dataset.said ?? "").split("\n");
    const more = (payload.details[nameOf(arrow)] ?? []).map(([head, text]) => `${head}: ${text}`);
    card.replaceChildren(h("p", { class: "rhd-first" }, first),
      ...[...rest, ...more].map((line) => h("p", {}, line)));
  }

  const arrowOf = (event) => event.target.closest?.(".rh-arrow");
  for (const name of ["pointerover", "focusin"]) {
    figure.addEventListener(name, (event) => {
      const arrow = arrowOf(event);
      if (arrow) tell(arrow);
    });
  }
  function choose(arrow) {
    const line = Number(arrow.dataset.line) || payload.lines[arrow.dataset.label];
    if (line) goTo(line);
  }
  figure.addEventListener("click", (event) => {
    const arrow = arrowOf(event);
    if (arrow) choose(arrow);
  });
  figure.addEventListener("keydown", (event) => {
    const arrow = arrowOf(event);
    if (!arrow || (event.key !== "Enter" && event.key !== " ")) return;
    event.preventDefault();
    choose(arrow);
  });

  function drawTables() {
    if (!changed("tables", [payload.tables, payload.bars, payload.lines])) return;
    tables.innerHTML = payload.tables; // made by the library, which escapes every string
    for (const head of tables.querySelectorAll("tbody th[scope='row']")) {
      const name = head.textContent;
      const line = payload.lines[name] ?? payload.lines[name.replace(/ \(side row of .*\)$/, "")];
      if (!line) continue;
      const link = h("button", { type: "button", class: "rhd-link", title: `line ${line}`, onclick: () => goTo(line) });
      link.append(...head.childNodes);
      head.append(link);
    }
    const all = tables.querySelectorAll("table");
    for (const bars of payload.bars) {
      bars.cells.forEach((mark, index) => {
        const cell = all[bars.table].tBodies[0].rows[index]?.cells[bars.column];
        // made by the desk of numbers alone
        if (mark && cell) cell.insertAdjacentHTML("beforeend", `<div>${mark}</div>`);
      });
    }
    sift();
  }

  // The search needs no kernel: rows that hold every word stay.
  function sift() {
    searching.hidden = !payload.search;
    const words = payload.search ? search.value.toLowerCase().split(/\s+/).filter(Boolean) : [];
    const rows = [...(tables.querySelector("table")?.tBodies[0].rows ?? [])];
    let kept = 0;
    for (const row of rows) {
      const text = row.textContent.toLowerCase();
      row.hidden = !words.every((word) => text.includes(word));
      kept += row.hidden ? 0 : 1;
    }
    found.textContent = words.length ? `${kept} of ${rows.length} rows` : `${rows.length} rows`;
  }
  search.addEventListener("input", sift);

  copy.addEventListener("click", async () => {
    try {
      await navigator.clipboard.writeText(code.textContent);
      copy.textContent = "Copied";
    } catch {
      // no clipboard on this page: the code is selected for the reader to copy
      el.ownerDocument.getSelection().selectAllChildren(code);
      copy.textContent = "Selected";
    }
    setTimeout(() => { copy.textContent = "Copy"; }, 1500);
  });
  explore.addEventListener("click", () => {
    const open = !payload.figure;
    explore.disabled = true;
    if (open) slot.replaceChildren(h("p", { class: "rhd-empty" }, "Making the figure …"));
    send({ kind: "figure", open });
  });

  return {
    el, slot, panel,
    update(next) {
      const switched = payload !== null && payload.view !== next.view;
      const top = panel.scrollTop;
      payload = next;
      drawTabs();
      question.textContent = payload.question;
      drawControls();
      drawStatus();
      empty.textContent = payload.empty;
      empty.hidden = !payload.empty;
      drawFigure();
      explore.textContent = payload.figure ? "Close the plotly figure" : "Open as a plotly figure";
      explore.setAttribute("aria-expanded", String(Boolean(payload.figure)));
      explore.disabled = false;
      drawTables();
      saving.textContent = payload.save_code;
      saving.hidden = savingWords.hidden = !payload.save_code;
      code.textContent = payload.code;
      code.hidden = copy.hidden = !payload.code;
      noCode.hidden = Boolean(payload.code);
      panel.scrollTop = switched ? 0 : top;
    },
  };
}
