// The typed sheet: a plain textarea with line numbers, marks on lines at fault, and the list of faults.

const LINE = 20; // px; desk.css sets the same line height
const PAD = 6; // px; padding of the textarea
const PAUSE = 120; // ms without a key before an edit is sent
const LONGEST_PAUSE = 400; // ms after which an edit is sent although keys go on
const PATIENCE = 4000; // ms without an answer before the reader is told
const TEXT_LIMIT = 2000000; // characters; the kernel refuses more, the page never sends them

function h(tag, attributes = {}, ...children) {
  const node = document.createElement(tag);
  for (const [name, value] of Object.entries(attributes)) {
    if (name.startsWith("on")) node.addEventListener(name.slice(2), value);
    else if (value === true) node.setAttribute(name, "");
    else if (value !== false && value !== null) node.setAttribute(name, value);
  }
  node.append(...children);
  return node;
}

// Where a caret at `place` goes when `before` becomes `after`: it stays with the text around it.
function movedCaret(before, after, place) {
  const shorter = Math.min(before.length, after.length);
  let head = 0;
  while (head < shorter && before[head] === after[head]) head++;
  let tail = 0;
  while (tail < shorter - head && before[before.length - 1 - tail] === after[after.length - 1 - tail]) tail++;
  if (place <= head) return place;
  return place >= before.length - tail ? place + after.length - before.length : head;
}

function makeEditor(client, send, say) {
  const area = h("textarea", {
    class: "rhd-text", spellcheck: "false", autocomplete: "off", autocapitalize: "off", wrap: "off",
    "aria-label": "Route sheet", "aria-describedby": `rhd-count-${client}`,
  });
  const gutter = h("pre", { class: "rhd-gutter", "aria-hidden": "true" });
  const marks = h("div", { class: "rhd-marks", "aria-hidden": "true" });
  const count = h("p", { class: "rhd-count", id: `rhd-count-${client}`, role: "status" });
  const list = h("ol", { class: "rhd-faults" });
  const paper = h("div", { class: "rhd-paper" }, marks, area);
  const el = h("section", { class: "rhd-sheet", "aria-label": "Typed sheet" },
    h("div", { class: "rhd-edit" }, gutter, paper),
    h("div", { class: "rhd-list", tabindex: "-1", "data-lm-suppress-shortcuts": "true" }, count, list));

  const state = { serial: 0, sent: 0, acked: 0, sentAt: 0, pendingSince: 0, refused: "" };
  let timer = 0;
  let patience = 0;
  let shownList = "";
  let shownGutter = "";
  let bad = new Set();

  function drawGutter() {
    let lines = 1;
    for (let at = area.value.indexOf("\n"); at >= 0; at = area.value.indexOf("\n", at + 1)) lines++;
    const key = `${lines}/${[...bad].join()}`;
    if (key !== shownGutter) {
      shownGutter = key;
      const numbers = [];
      for (let n = 1; n <= lines; n++) numbers.push(bad.has(n) ? `! ${n}` : `${n}`);
      // room for the mark of a fault is always there, so that the text beside it never moves
      gutter.style.minWidth = `calc(${String(lines).length + 2}ch + 10px)`;
      gutter.textContent = numbers.join("\n") + "\n\n";
    }
    follow();
  }

  function follow() {
    gutter.scrollTop = area.scrollTop;
    marks.style.transform = `translate(${-area.scrollLeft}px, ${-area.scrollTop}px)`;
  }

  function drawMarks(faults) {
    const lines = area.value.split("\n");
    marks.replaceChildren(...faults.flatMap((fault) => {
      const typed = lines[fault.line - 1];
      if (typed === undefined) return [];
      const top = PAD + (fault.line - 1) * LINE;
      const strip = h("div", { class: "rhd-strip" });
      strip.style.top = `${top}px`;
      const before = typed.slice(0, fault.column - 1);
      // characters of other widths would shift the underline, so it is drawn only behind plain ones
      if (!/^[\x20-\x7e\u00b0\u00b1\u00b7\u2192\u2212\u0394]*$/.test(before)) return [strip];
      const under = h("div", { class: "rhd-under" });
      under.style.top = `${top}px`;
      under.style.left = `calc(${PAD}px + ${before.length}ch)`;
      under.style.width = `${Math.max(1, Math.min(fault.length, typed.length - before.length))}ch`;
      return [strip, under];
    }));
  }

  function goTo(line, column = 0, length = 0) {
    const lines = area.value.split("\n");
    if (!(line >= 1 && line <= lines.length)) return;
    const typed = lines[line - 1];
    let start = lines.slice(0, line - 1).reduce((sum, text) => sum + text.length + 1, 0);
    const indent = typed.length - typed.trimStart().length;
    const end = column ? Math.min(start + column - 1 + length, start + typed.length) : start + typed.length;
    start += column ? Math.min(column - 1, typed.length) : indent;
    area.focus({ preventScroll: true });
    area.setSelectionRange(start, Math.max(start, end));
    area.scrollTop = Math.max(0, (line - 1) * LINE - area.clientHeight / 3);
    if (!column || column < 50) area.scrollLeft = 0;
    follow();
  }

  function refuse(characters) {
    state.refused = `${characters.toLocaleString("en")} characters are too many for a route sheet ` +
      `(limit ${TEXT_LIMIT.toLocaleString("en")}): not taken over`;
    drawList(state.last);
  }

  function item(kind, fault) {
    const place = `${fault.line}:${fault.column}`;
    const words = fault.hint ? `${fault.message} (${fault.hint})` : fault.message;
    return h("li", {}, h("button", {
      type: "button", class: `rhd-${kind}`, "aria-label": `line ${fault.line}, column ${fault.column}: ${words}`,
      onclick: () => goTo(fault.line, fault.column, fault.length),
    }, h("span", { class: "rhd-place" }, place), h("span", {}, kind === "notice" ? `Note: ${words}` : words)));
  }

  function drawList(payload) {
    const key = JSON.stringify([payload.faults, payload.notices, payload.more_faults, state.refused]);
    if (key === shownList) return;
    shownList = key;
    const number = payload.faults.length;
    const faults = number === 0 ? "No faults" : number === 1 ? "1 fault" : `${number} faults`;
    const notices = payload.notices.length;
    const notes = notices === 0 ? "" : notices === 1 ? ", 1 note" : `, ${notices} notes`;
    count.textContent = faults + (payload.more_faults ? ` ${payload.more_faults}` : "") + notes;
    const refused = state.refused ? [h("li", { class: "rhd-refused" }, state.refused)] : [];
    list.replaceChildren(...refused, ...payload.faults.map((fault) => item("fault", fault)),
      ...payload.notices.map((fault) => item("notice", fault)));
  }

  function schedule() {
    clearTimeout(timer);
    const now = performance.now();
    state.pendingSince ||= now;
    timer = setTimeout(trySend, Math.max(0, Math.min(PAUSE, state.pendingSince + LONGEST_PAUSE - now)));
  }

  function trySend() {
    clearTimeout(timer);
    if (state.serial === state.sent) return;
    const waiting = state.sent > state.acked && performance.now() - state.sentAt < PATIENCE;
    // one edit on its way at a time: the next goes out when its answer is in, with the newest text
    if (waiting) return;
    state.sent = state.serial;
    state.sentAt = performance.now();
    state.pendingSince = 0;
    send({ kind: "edit", text: area.value, client, serial: state.sent });
    clearTimeout(patience);
    patience = setTimeout(() => {
      if (state.sent > state.acked) say("The kernel has not answered yet. What is typed is kept here.");
      trySend();
    }, PATIENCE);
  }

  function onInput() {
    drawGutter();
    if (area.value.length > TEXT_LIMIT) {
      refuse(area.value.length);
      return;
    }
    state.refused = "";
    state.serial++;
    schedule();
  }

  function onPaste(event) {
    const pasted = event.clipboardData?.getData("text/plain") ?? "";
    const total = area.value.length - (area.selectionEnd - area.selectionStart) + pasted.length;
    if (total > TEXT_LIMIT) {
      event.preventDefault();
      refuse(total);
    }
  }

  function adopt(text) {
    const focused = area.getRootNode().activeElement === area;
    const { selectionStart, selectionEnd, scrollTop, scrollLeft } = area;
    const before = area.value;
    area.value = text;
    if (focused) {
      area.setSelectionRange(movedCaret(before, text, selectionStart), movedCaret(before, text, selectionEnd));
    }
    area.scrollTop = scrollTop;
    area.scrollLeft = scrollLeft;
  }

  function update(payload) {
    state.last = payload;
    state.acked = Math.max(state.acked, payload.acks[client] ?? 0);
    if (state.acked >= state.sent) {
      clearTimeout(patience);
      say("");
    }
    area.readOnly = !payload.editable;
    const mine = state.serial > state.acked;
    if (!mine && payload.text !== area.value) adopt(payload.text);
    // places of faults belong to the text they were found in
    if (!mine) {
      bad = new Set(payload.faults.map((fault) => fault.line));
      drawGutter();
      drawMarks(payload.faults);
      drawList(payload);
    }
    if (mine) trySend();
  }

  area.addEventListener("input", onInput);
  area.addEventListener("paste", onPaste);
  area.addEventListener("scroll", follow);
  area.addEventListener("blur", trySend);
  // the notebook's own shortcuts must not act on what is typed here
  for (const name of ["keydown", "keypress", "keyup"]) area.addEventListener(name, (event) => event.stopPropagation());

  // Replace a stretch of the text the kernel knows, as one edit that the browser's own undo takes back.
  function replace(plan) {
    if (!plan || area.readOnly) return;
    if (area.value !== state.last?.text) {
      say("The text has just changed: look at the new picture first.");
      return;
    }
    area.focus({ preventScroll: true });
    area.setSelectionRange(plan.start, plan.end);
    if (!area.ownerDocument.execCommand("insertText", false, plan.text)) {
      area.setRangeText(plan.text, plan.start, plan.end, "end");
      onInput();
    }
    area.setSelectionRange(plan.start, plan.start + plan.text.length);
    const line = area.value.slice(0, plan.start).split("\n").length;
    area.scrollTop = Math.max(0, (line - 1) * LINE - area.clientHeight / 3);
    follow();
  }

  return {
    el, update, goTo, replace,
    freeze() {
      area.readOnly = true;
      // in a text that cannot be edited the notebook would take letters for shortcuts
      el.setAttribute("data-lm-suppress-shortcuts", "true");
    },
    destroy() {
      trySend();
      clearTimeout(timer);
      clearTimeout(patience);
    },
  };
}
