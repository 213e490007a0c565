// Take along: figure, table and report as files. The kernel makes them in memory; nothing is saved on its side.

const TAKE_PATIENCE = 30000; // ms without an answer before the reader is told

function makeTake(client, send) {
  const waiting = new Map();
  let serial = 0;
  const said = h("span", { class: "rhd-hint", role: "status" });
  const say = (words) => {
    said.textContent = words;
  };
  const pick = (label) => h("select", { "aria-label": label });
  const figures = pick("Which figure");
  const tables = pick("Which table for CSV");
  const widths = pick("Width of the figure");
  widths.append(...["84 mm", "174 mm"].map((value) => h("option", { value }, value)));

  function ask(message) {
    serial += 1;
    const number = serial;
    return new Promise((resolve, reject) => {
      const timer = setTimeout(() => {
        waiting.delete(number);
        reject(new Error("the kernel has not answered"));
      }, TAKE_PATIENCE);
      waiting.set(number, { resolve, reject, timer });
      send({ kind: "take", client, serial: number, ...message });
    });
  }

  function receive(message, buffers) {
    const asked = message?.kind === "taken" && message.client === client ? waiting.get(message.serial) : undefined;
    if (!asked) return;
    waiting.delete(message.serial);
    clearTimeout(asked.timer);
    if (message.error) asked.reject(new Error(message.error));
    else asked.resolve({ name: message.name, blob: new Blob([buffers[0]], { type: message.mime }) });
  }

  async function download(what, form) {
    say(`making the ${what} …`);
    try {
      const index = what === "figure" ? figures.value : what === "table" ? tables.value : 0;
      const { name, blob } = await ask({ what, form, width: widths.value, index: Number(index) || 0 });
      const url = URL.createObjectURL(blob);
      const link = h("a", { href: url, download: name, hidden: true });
      el.append(link);
      link.click();
      link.remove();
      setTimeout(() => URL.revokeObjectURL(url), 60000);
      say(`${name}`);
    } catch (problem) {
      say(`Not taken: ${problem.message}`);
    }
  }

  async function copyPicture() {
    if (!navigator.clipboard?.write || typeof ClipboardItem === "undefined") {
      say("This page may not copy pictures: take the PNG instead.");
      return;
    }
    say("making the picture …");
    try {
      const index = Number(figures.value) || 0;
      const png = ask({ what: "figure", form: "png", width: widths.value, index }).then(({ blob }) => blob);
      // the promise goes in unawaited: a page may copy only as the direct answer to a click
      await navigator.clipboard.write([new ClipboardItem({ "image/png": png })]);
      say("copied as PNG");
    } catch (problem) {
      say(`Not copied: ${problem.message}`);
    }
  }

  const button = (words, label, onclick) => h("button", { type: "button", class: "rhd-button", "aria-label": label,
    onclick }, words);
  const forms = (what, ...names) => names.map((form) =>
    button(form.toUpperCase(), `Take the ${what} as ${form.toUpperCase()}`, () => download(what, form)));
  const group = (words, ...parts) => h("span", { class: "rhd-take-group" }, h("span", {}, words), ...parts);
  const figure = group("figure", figures, widths, ...forms("figure", "svg", "pdf", "png"),
    button("Copy PNG", "Copy the figure as PNG", copyPicture));
  const table = group("table", tables, ...forms("table", "csv", "xlsx"));
  const report = group("report", ...forms("report", "html", "docx", "pdf"));
  const el = h("section", { class: "rhd-take", "aria-label": "Take along", "data-lm-suppress-shortcuts": "true" },
    h("strong", {}, "Take along"), figure, table, report, said);
  let shown = "";

  function fill(field, box, titles) {
    const value = field.value;
    field.replaceChildren(...titles.map((title, index) => h("option", { value: index }, title)));
    if (Number(value) < titles.length) field.value = value || 0;
    field.hidden = titles.length < 2;
    for (const part of box.querySelectorAll("button, select")) part.disabled = !titles.length;
  }

  return {
    el, receive,
    update({ take, faults }) {
      const key = JSON.stringify([take, faults.length]);
      if (key === shown) return;
      shown = key;
      fill(figures, figure, take.figures);
      fill(tables, table, take.tables);
      for (const part of report.querySelectorAll("button")) part.disabled = faults.length > 0;
      say("");
    },
    destroy() {
      for (const { timer } of waiting.values()) clearTimeout(timer);
      waiting.clear();
    },
  };
}
