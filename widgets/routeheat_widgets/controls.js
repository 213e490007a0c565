// Choices above a view: selections, fields to type in, and values of the sheet that can be moved by a slider.

const MOVE_PAUSE = 60; // ms between two positions of a slider that are sent

function makeControl(control, send) {
  const choose = (value) => send({ kind: "option", key: control.key, value });
  const name = h("span", {}, control.label);
  if (control.choices.length) {
    const field = h("select", { "data-key": control.key, onchange: (event) => choose(event.target.value) },
      ...control.choices.map(([value, words]) => h("option", { value }, words)));
    return h("label", {}, name, field);
  }
  const field = h("input", {
    type: "text", size: control.unit || control.moves ? "6" : "8", "data-key": control.key, autocomplete: "off",
    placeholder: control.moves ? "" : control.unit ? "0" : "12 kg",
    onchange: () => choose(field.value),
    onkeydown: (event) => {
      if (event.key === "Enter") choose(field.value);
    },
  });
  if (!control.moves) {
    const hint = h("span", { class: "rhd-hint" });
    return h("label", {}, name, field, h("span", {}, control.unit), hint);
  }
  const parts = [name];
  if (control.limits) {
    const [min, max, step] = control.limits;
    let timer = 0;
    const slider = h("input", {
      type: "range", min, max, step, "data-slide": control.key, "aria-label": `${control.label}, ${control.unit}`,
      oninput: () => {
        field.value = slider.value;
        timer ||= setTimeout(() => {
          timer = 0;
          choose(slider.value);
        }, MOVE_PAUSE);
      },
    });
    parts.push(slider);
  } else {
    parts.push(h("span", {}));
  }
  field.setAttribute("aria-label", `${control.label}, ${control.unit}`);
  return h("div", { class: "rhd-move" }, ...parts, h("span", {}, field, ` ${control.unit}`),
    h("span", { class: "rhd-hint" }));
}

// What the kernel says of a control, without disturbing a field that is being used.
function setControl(box, control) {
  const active = box.getRootNode().activeElement;
  const field = box.querySelector(`[data-key='${control.key}']`);
  const slider = box.querySelector(`[data-slide='${control.key}']`);
  const used = active === slider || (active === field && field.tagName === "INPUT");
  if (!used && field.value !== control.value) field.value = control.value;
  if (slider && !used && slider.value !== control.value) slider.value = control.value;
  const hint = field.closest("label, .rhd-move").querySelector(".rhd-hint");
  if (hint && hint.textContent !== control.hint) hint.textContent = control.hint;
}

// Values that can be moved, with what can be done with them.
function makeMoves(send, write) {
  const rows = h("div", { class: "rhd-move-rows" });
  const words = h("span", { class: "rhd-hint", role: "status" });
  const into = h("button", { type: "button", class: "rhd-button rhd-write", onclick: () => write() },
    "Write into the sheet");
  const back = h("button", {
    type: "button", class: "rhd-button", onclick: () => send({ kind: "option", key: "moves", value: "" }),
  }, "Back to what is typed");
  const el = h("div", { class: "rhd-moves", role: "group", "aria-label": "Values to move" },
    rows, h("div", { class: "rhd-move-end" }, into, back, words));
  return {
    el, rows,
    update(plan) {
      into.disabled = !plan;
      words.textContent = plan ? `would write ${plan.words}` : "Move a value: the typed sheet stays as it is.";
    },
  };
}
