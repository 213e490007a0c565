// The desk: the sheet on one side, the views on the other, one payload from the kernel for both.

const WIDTH_STEP = 20; // px; smaller changes of width are not worth a new picture

function render({ model, el }) {
  let gone = false;
  const client = Math.random().toString(36).slice(2, 10);
  const send = (message) => {
    if (!gone) model.send(message);
  };
  const file = h("div", { class: "rhd-file" });
  const note = h("p", { class: "rhd-note", role: "status" });
  const say = (words) => {
    if (!gone && note.textContent !== words) note.textContent = words;
  };
  const caution = h("p", { class: "rhd-caution" });
  let stamp = -1;
  let shownFile = "";
  let shownFigure = "";
  let plotly = null;
  let widthTimer = 0;
  let sentWidth = 0;

  const editor = makeEditor(client, send, say);
  const page = makePage(client, send, (line) => editor.goTo(line), (plan) => editor.replace(plan));
  const take = makeTake(client, send);
  const root = h("div", { class: "rhd" },
    h("div", { class: "rhd-bar" }, file, note), h("div", { class: "rhd-panes" }, editor.el, page.el), take.el,
    caution);

  function drawFile(state) {
    const key = JSON.stringify(state);
    if (key === shownFile) return;
    shownFile = key;
    const button = (what, words) =>
      h("button", { type: "button", class: "rhd-button", onclick: () => send({ kind: "file", what }) }, words);
    file.className = `rhd-file rhd-file-${state.kind}`;
    file.replaceChildren(h("span", {}, state.message));
    if (state.kind === "changed") {
      file.append(button("take", "Show the file's text"), button("keep", "Save the desk's text over it"));
    }
  }

  async function drawPlotly(id) {
    if (id === shownFigure) return;
    shownFigure = id;
    plotly?.remove();
    plotly = null;
    page.slot.replaceChildren();
    if (!id) return;
    const child = await model.widget_manager.get_model(id);
    const view = await model.widget_manager.create_view(child);
    if (shownFigure !== id) {
      view.remove();
      return;
    }
    plotly = view;
    page.slot.replaceChildren(view.el);
  }

  function update() {
    const payload = model.get("payload");
    if (payload.stamp <= stamp) return;
    stamp = payload.stamp;
    root.style.setProperty("--rhd-height", `${payload.height}px`);
    editor.update(payload);
    page.update(payload);
    take.update(payload);
    caution.textContent = payload.caution;
    drawFile(payload.file);
    drawPlotly(payload.figure);
  }

  function lost() {
    gone = true;
    root.classList.add("rhd-gone");
    editor.freeze();
    note.textContent = "The kernel is gone: this is the last picture. Run the cell again for a live desk.";
  }

  function measure() {
    const width = Math.floor((page.panel.clientWidth - 30) / WIDTH_STEP) * WIDTH_STEP;
    if (width < 100 || width === sentWidth) return;
    clearTimeout(widthTimer);
    widthTimer = setTimeout(() => {
      sentWidth = width;
      send({ kind: "width", width });
    }, sentWidth ? 150 : 0);
  }

  const look = () => {
    if (!gone && model.get("payload").file.kind !== "none" && document.visibilityState === "visible") {
      send({ kind: "file", what: "look" });
    }
  };
  const sizes = new ResizeObserver(measure);
  const watch = setInterval(look, 5000);

  el.append(root);
  sizes.observe(page.panel);
  root.addEventListener("focusin", (event) => {
    if (!root.contains(event.relatedTarget)) look();
  });
  model.on("change:payload", update);
  model.on("comm_live_update", lost);
  model.on("msg:custom", take.receive);
  update();

  return () => {
    editor.destroy();
    clearTimeout(widthTimer);
    clearInterval(watch);
    sizes.disconnect();
    plotly?.remove();
    model.off("change:payload", update);
    model.off("comm_live_update", lost);
    model.off("msg:custom", take.receive);
    take.destroy();
    root.remove();
  };
}

export default { render };
