"""The desk as a chemist meets it: JupyterLab in a real browser, nothing simulated."""

from __future__ import annotations

import json
import os
from collections.abc import Callable
from typing import Any

import pytest

pytestmark = pytest.mark.browser

SHEET = """uncertainty k = 2

species
  SUB  C7H8O(l)    name "starting alcohol"
  OXI  C7H6O(l)    name "aldehyde"
  ACD  C7H6O2(s)   name "acid"

known
  [K1] formation of CO2(g) | dH -393.51 ± 0.13 kJ/mol
  [K2] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol
  [K3] combustion of C2H2(g) to CO2(g), H2O(l) | dH -1299.4 ± 0.8 kJ/mol

target [T] 2 C(s, graphite) + H2(g) -> C2H2(g)

route A "in one go" makes ACD
  [A1] SUB + O2(g) -> ACD + H2O(l)
       dH -550 ± 30 kJ/mol | yield 80 % | source "calorimeter"

route B "over the aldehyde" makes ACD
  [B1] SUB + 1/2 O2(g) -> OXI + H2O(l)
       dH -180 ± 12 kJ/mol | yield 90 %
  [B2] OXI + 1/2 O2(g) -> ACD
       dH -295 ± 15 kJ/mol | yield 92 %
"""
LINE_OF_A1 = 16


def cell(text: str = SHEET, rest: str = "desk") -> str:
    return f"import routeheat_widgets as rw\ndesk = rw.RouteDesk(text={text!r})\n{rest}"


@pytest.fixture
def desk(sight: Any, request: pytest.FixtureRequest) -> Callable[..., Any]:
    """Opens a notebook with the given cells, runs it, and waits for its desks."""

    def open_(*cells: str, desks: int = 1) -> Any:
        name = f"{request.node.name.replace('[', '_').replace(']', '')}.ipynb"
        sight.lab.write(name, *(cells or (cell(),)))
        sight.open(name)
        sight.run_all()
        sight.page.wait_for_function(f"document.querySelectorAll('.rhd .rhd-tabs button').length >= {4 * desks}")
        settled(sight)
        return sight

    return open_


def settled(sight: Any) -> None:
    """Wait until the width of the pane has reached the kernel: the first picture after that is drawn for the page."""
    assert wait_for_kernel(sight, "print(desk.payload['stamp'] > 1)") == "True"


def select(sight: Any, text: str, index: int = 0) -> None:
    """Put the selection of a desk's text on ``text``, as a reader would with the mouse."""
    sight.page.evaluate(
        """([text, index]) => {
            const area = document.querySelectorAll('.rhd-text')[index];
            const at = area.value.indexOf(text);
            if (at < 0) throw new Error('not in the text: ' + text);
            area.focus(); area.setSelectionRange(at, at + text.length);
        }""",
        [text, index],
    )


def retype(sight: Any, old: str, new: str, index: int = 0) -> None:
    select(sight, old, index)
    sight.page.keyboard.type(new, delay=15)


def expect_text(sight: Any, selector: str, text: str, index: int = 0) -> None:
    sight.page.wait_for_function(
        "([s, t, i]) => document.querySelectorAll(s)[i]?.textContent.includes(t)", arg=[selector, text, index]
    )


def clean(sight: Any) -> None:
    assert sight.strangers == []
    assert sight.complaints == []


def test_a_typed_change_reaches_number_and_diagram(desk: Any) -> None:
    sight = desk()
    expect_text(sight, ".rhd-figure", "−688")
    before = sight.page.inner_html(".rhd-figure")
    retype(sight, "-550", "-400")
    expect_text(sight, ".rhd-figure", "−500")
    expect_text(sight, ".rhd-tables", "−500")
    assert sight.page.inner_html(".rhd-figure") != before
    assert sight.ask("print(desk.sheet.routes['A'].step('A1').row.heat.text)") == "-400 ± 30 kJ/mol"
    clean(sight)


def test_a_broken_line_shows_its_fault_keeps_the_picture_and_mends(desk: Any) -> None:
    sight = desk()
    picture = sight.page.inner_html(".rhd-figure")
    place = sight.page.locator(".rhd-figure").bounding_box()
    retype(sight, "-550", "-5x0")
    expect_text(sight, ".rhd-count", "1 fault")
    expect_text(sight, ".rhd-status", f"Route A is shown as it was before line {LINE_OF_A1 + 1} was broken.")
    assert sight.page.inner_html(".rhd-figure") == picture
    assert sight.page.locator(".rhd-figure").bounding_box() == place
    assert "! 17" in sight.page.inner_text(".rhd-gutter")
    sight.page.locator(".rhd-faults button").first.click()
    chosen = "(() => { const a = document.querySelector('.rhd-text'); return a.value.slice(0, a.selectionStart); })()"
    assert sight.page.evaluate(chosen).count("\n") == LINE_OF_A1
    # what the healthy lines say goes on being computed
    retype(sight, "-295", "-300")
    expect_text(sight, ".rhd-figure", "−326")
    retype(sight, "-5x0", "-400")
    expect_text(sight, ".rhd-count", "No faults")
    expect_text(sight, ".rhd-status", "Up to date with the text.")
    expect_text(sight, ".rhd-figure", "−500")
    clean(sight)


def test_typing_never_loses_a_key_the_caret_or_the_scroll_position(desk: Any) -> None:
    sight = desk(cell(SHEET + "\n" * 60))
    page = sight.page
    page.evaluate(
        "(() => { const a = document.querySelector('.rhd-text'); a.focus();"
        " a.setSelectionRange(a.value.length, a.value.length); })()"
    )
    page.keyboard.type("# one note, typed quickly and in one go, to see that nothing is lost", delay=3)
    wanted = SHEET + "\n" * 60 + "# one note, typed quickly and in one go, to see that nothing is lost"
    assert page.input_value(".rhd-text") == wanted
    page.evaluate("document.querySelector('.rhd-panel').scrollTop = 150")
    top = page.evaluate("document.querySelector('.rhd-text').scrollTop")
    page.keyboard.type(" more")
    page.wait_for_function("document.querySelector('.rhd-text').value.endsWith(' more')")
    assert page.evaluate("document.querySelector('.rhd-panel').scrollTop") == 150
    assert page.evaluate("document.querySelector('.rhd-text').scrollTop") == top
    assert page.evaluate("document.activeElement.className") == "rhd-text"
    assert wait_for_kernel(sight, "print(desk.text.endswith(' more'))") == "True"
    page.keyboard.press("Control+z")
    assert not page.input_value(".rhd-text").endswith(" more")
    clean(sight)


def wait_for_kernel(sight: Any, code: str, wanted: str = "True") -> str:
    """Ask the kernel until it says ``wanted``; what it said last."""
    said = ""
    for _ in range(40):
        said = sight.ask(code)
        if said == wanted:
            break
        sight.page.wait_for_timeout(50)
    return said


def test_arrows_tell_their_story_and_lead_to_their_line_by_keyboard(desk: Any) -> None:
    sight = desk()
    page = sight.page
    page.focus(".rh-arrow[data-label='A1']")
    expect_text(sight, ".rhd-card", "A1: SUB")
    for words in ("origin: typed", "source: calorimeter", "cumulative", "variance from: A1"):
        expect_text(sight, ".rhd-card", words)
    page.keyboard.press("Enter")
    chosen = page.evaluate(
        "(() => { const a = document.querySelector('.rhd-text');"
        " return a.value.slice(a.selectionStart, a.selectionEnd); })()"
    )
    assert chosen == "[A1] SUB + O2(g) -> ACD + H2O(l)"
    assert page.evaluate("document.activeElement.className") == "rhd-text"
    clean(sight)


def test_tabs_are_reached_and_changed_with_arrow_keys(desk: Any) -> None:
    sight = desk()
    page = sight.page
    page.focus(".rhd-tabs [aria-selected='true']")
    seen = []
    questions = (
        "What happens in each step?", "What is this heat, and why?", "Which heats are known", "Which one measurement",
        "What does a step do at scale", "What is typed",
    )  # fmt: skip
    for question in questions:
        page.keyboard.press("ArrowRight")
        expect_text(sight, ".rhd-question", question)
        seen.append(page.evaluate("document.activeElement.dataset.view"))
    assert seen == ["steps", "heat", "known", "measure", "scale", "typed"]
    assert sight.ask("print(desk.view)") == "typed"
    page.click(".rhd-tables tbody th button:text-is('B2')")
    chosen = page.evaluate("document.querySelector('.rhd-text').selectionStart")
    assert chosen == SHEET.index("[B2]")
    clean(sight)


def test_choices_reach_the_kernel(desk: Any) -> None:
    sight = desk()
    sight.page.select_option("[data-key='per']", "kg")
    expect_text(sight, ".rhd-figure", "kJ kg⁻¹")
    sight.page.select_option("[data-key='per']", "batch")
    sight.page.fill("[data-key='batch']", "12 kg")
    sight.page.keyboard.press("Enter")
    expect_text(sight, ".rhd-figure", "per 12 kg")
    sight.page.select_option("[data-key='show']", "one axis")
    expect_text(sight, ".rhd-code", "overlay=True")
    clean(sight)


def test_hostile_names_appear_as_text(desk: Any) -> None:
    evil = "<img src=http://example.invalid/x onerror=alert(1)><script>window.hacked=1</script>'`$x$&amp;"
    text = (
        SHEET.replace("in one go", evil)
        .replace("starting alcohol", evil)
        .replace("calorimeter", evil)
        .replace("SUB ", "<b>S</b> ")
        .replace("SUB +", "<b>S</b> +")
    )
    sight = desk(cell(text))
    for view in ("routes", "steps", "heat", "known", "measure", "scale", "typed"):
        sight.page.click(f".rhd-tabs [data-view='{view}']")
        sight.page.wait_for_selector(f".rhd-tabs [data-view='{view}'][aria-selected='true']")
        assert sight.page.evaluate("document.querySelectorAll('.rhd img, .rhd script, .rhd b').length") == 0
    sight.page.click(".rhd-tabs [data-view='typed']")
    expect_text(sight, ".rhd-tables", evil)
    sight.page.click(".rhd-tabs [data-view='routes']")
    sight.page.wait_for_selector(".rh-arrow[data-label='A1']")
    sight.page.focus(".rh-arrow[data-label='A1']")
    expect_text(sight, ".rhd-card", "<img src=http")
    assert sight.page.evaluate("window.hacked") is None
    clean(sight)


def test_a_huge_paste_is_refused_and_the_page_lives(desk: Any) -> None:
    sight = desk()
    select(sight, "uncertainty")
    sight.page.evaluate(
        """() => {
            const data = new DataTransfer();
            data.setData('text/plain', 'x'.repeat(10000000));
            const event = new ClipboardEvent('paste', {clipboardData: data, bubbles: true, cancelable: true});
            document.querySelector('.rhd-text').dispatchEvent(event);
        }"""
    )
    expect_text(sight, ".rhd-faults", "characters are too many for a route sheet")
    assert sight.page.input_value(".rhd-text") == SHEET
    retype(sight, "-550", "-400")
    expect_text(sight, ".rhd-figure", "−500")
    clean(sight)


def test_a_paste_with_foreign_line_ends_reads_the_same(desk: Any) -> None:
    sight = desk(cell(""))
    sight.page.focus(".rhd-text")
    sight.page.evaluate("(text) => document.execCommand('insertText', false, text)", SHEET.replace("\n", "\r\n"))
    expect_text(sight, ".rhd-figure", "−688")
    expect_text(sight, ".rhd-count", "No faults")
    assert sight.page.input_value(".rhd-text") == SHEET
    assert "\r" not in sight.ask("print(repr(desk.text))")
    clean(sight)


def test_two_desks_live_side_by_side(desk: Any) -> None:
    sight = desk(cell(), "other = rw.RouteDesk(text=desk.text)\nother", desks=2)
    retype(sight, "-550", "-400", 1)
    expect_text(sight, ".rhd-figure", "−500", 1)
    assert "−688" in sight.page.locator(".rhd-figure").nth(0).text_content()
    assert sight.ask("print('-400' in desk.text, '-400' in other.text)") == "False True"
    clean(sight)


def test_one_desk_shown_twice_stays_in_step_and_closes_everywhere(desk: Any) -> None:
    sight = desk(cell(), "desk", desks=2)
    page = sight.page
    retype(sight, "-550", "-400", 0)
    expect_text(sight, ".rhd-figure", "−500", 1)
    assert page.locator(".rhd-text").nth(1).input_value() == page.locator(".rhd-text").nth(0).input_value()
    page.evaluate(
        "(() => { const a = document.querySelectorAll('.rhd-text')[1]; a.focus();"
        " a.setSelectionRange(a.value.length, a.value.length); })()"
    )
    page.keyboard.type("# end")
    page.wait_for_function("document.querySelectorAll('.rhd-text')[0].value.endsWith('# end')")
    assert page.evaluate("document.activeElement === document.querySelectorAll('.rhd-text')[1]")
    stamp = sight.ask("print(desk.payload['stamp'])")
    sight.page.wait_for_timeout(600)
    assert sight.ask("print(desk.payload['stamp'])") == stamp, "the two views go on answering each other"
    sight.ask("desk.close()")
    page.wait_for_function("document.querySelectorAll('.rhd').length === 0")
    assert sight.ask("import ipywidgets; print(len(ipywidgets.Widget.get_manager_state()['state']))") == "0"
    clean(sight)


def test_edits_are_answered_while_a_long_cell_runs(desk: Any) -> None:
    sight = desk(cell(), "import time")
    sight.page.evaluate(
        "void panel.sessionContext.session.kernel.requestExecute({code: 'time.sleep(8); print(1)'}).done"
    )
    retype(sight, "-550", "-400")
    sight.page.wait_for_function("document.querySelector('.rhd-figure').textContent.includes('−500')", timeout=6000)
    clean(sight)


def test_a_change_from_code_reaches_the_page_and_keeps_the_caret(desk: Any) -> None:
    sight = desk()
    select(sight, "-295")
    sight.ask("desk.text = '# first line\\n' + desk.text.replace('-550', '-400')")
    expect_text(sight, ".rhd-figure", "−500")
    chosen = sight.page.evaluate(
        "(() => { const a = document.querySelector('.rhd-text');"
        " return a.value.slice(a.selectionStart, a.selectionEnd); })()"
    )
    assert chosen == "-295"
    clean(sight)


def test_a_reload_finds_the_typed_text_again(desk: Any) -> None:
    sight = desk()
    retype(sight, "-550", "-400")
    expect_text(sight, ".rhd-figure", "−500")
    name = sight.page.evaluate("panel.context.path")
    sight.page.evaluate("panel.context.save()")
    sight.page.goto(f"{sight.lab.url}/lab")
    sight.page.wait_for_function("window.jupyterapp && window.jupyterapp.restored", timeout=60_000)
    sight.page.evaluate("window.jupyterapp.restored")
    sight.reopen(name)
    expect_text(sight, ".rhd-figure", "−500")
    assert "-400" in sight.page.input_value(".rhd-text")
    retype(sight, "-400", "-200")
    expect_text(sight, ".rhd-figure", "−250")
    clean(sight)


def test_a_restart_leaves_the_last_picture_and_says_so(desk: Any) -> None:
    sight = desk()
    sight.page.evaluate("panel.sessionContext.session.kernel.restart()")
    expect_text(sight, ".rhd-bar", "The kernel is gone: this is the last picture.")
    assert "−688" in sight.page.inner_text(".rhd-figure")
    assert sight.page.evaluate("document.querySelector('.rhd-text').readOnly")
    sight.run_all()
    sight.page.wait_for_function("!document.querySelector('.rhd-gone')")
    retype(sight, "-550", "-400")
    expect_text(sight, ".rhd-figure", "−500")
    clean(sight)


def test_a_saved_notebook_without_its_kernel_shows_the_figure(desk: Any) -> None:
    sight = desk()
    page = sight.page
    assert (
        page.evaluate("getComputedStyle(document.querySelector('.rhd-twin').closest('.jp-OutputArea-child')).display")
        == "none"
    )
    name = page.evaluate("panel.context.path")
    page.evaluate("panel.context.save()")
    page.evaluate("window.jupyterapp.serviceManager.sessions.shutdownAll()")
    saved = (sight.lab.folder / name).read_text(encoding="utf-8")
    assert len(saved) < 1_000_000
    content = json.loads(saved)
    content["metadata"].pop("widgets", None)
    (sight.lab.folder / f"saved_{name}").write_text(json.dumps(content), encoding="utf-8")
    page.goto(f"{sight.lab.url}/lab?reset")
    page.wait_for_function("window.jupyterapp && window.jupyterapp.restored", timeout=60_000)
    page.evaluate("window.jupyterapp.restored")
    sight.reopen(f"saved_{name}")
    page.wait_for_selector(".rhd-twin img")
    page.wait_for_function("document.querySelector('.rhd-twin img').naturalWidth > 200")
    assert page.evaluate("document.querySelector('.rhd-twin').getBoundingClientRect().height") > 200
    assert sight.strangers == []


def test_a_plotly_figure_opens_follows_and_closes(desk: Any) -> None:
    sight = desk()
    page = sight.page
    page.click(".rhd-explore")
    page.wait_for_selector(".rhd-plotly .js-plotly-plot", timeout=60_000)
    page.wait_for_function("document.querySelector('.rhd-plotly').textContent.includes('−688')")
    page.evaluate("document.querySelector('.rhd-plotly .js-plotly-plot').marked = true")
    retype(sight, "-550", "-400")
    page.wait_for_function("document.querySelector('.rhd-plotly').textContent.includes('−500')", timeout=20_000)
    assert page.evaluate("document.querySelector('.rhd-plotly .js-plotly-plot').marked"), "made again, not in place"
    page.click(".rhd-explore")
    page.wait_for_function("!document.querySelector('.rhd-plotly .js-plotly-plot')")
    clean(sight)


def test_the_desk_folds_to_one_column_and_nothing_sticks_out(desk: Any) -> None:
    sight = desk()
    page = sight.page
    for width, columns in ((1280, 2), (760, 1)):
        page.set_viewport_size({"width": width, "height": 800})
        page.wait_for_function(
            "(n) => getComputedStyle(document.querySelector('.rhd-panes')).gridTemplateColumns.split(' ').length === n",
            arg=columns,
        )
        assert page.evaluate(
            """() => { const root = document.querySelector('.rhd').getBoundingClientRect();
                return [...document.querySelectorAll('.rhd-panes > *, .rhd-panel, .rhd-card, .rhd-caution')]
                    .every(node => node.getBoundingClientRect().right <= root.right + 1); }"""
        )
    clean(sight)


def test_the_dark_theme_is_followed(desk: Any) -> None:
    sight = desk()
    page = sight.page

    def colours() -> Any:
        return page.evaluate(
            "[getComputedStyle(document.querySelector('.rhd')).backgroundColor,"
            " getComputedStyle(document.querySelector('.rh-diagram')).color]"
        )

    light = colours()
    page.evaluate("jupyterapp.commands.execute('apputils:change-theme', {theme: 'JupyterLab Dark'})")
    page.wait_for_function("document.body.dataset.jpThemeLight === 'false'")
    page.wait_for_function(
        "(old) => getComputedStyle(document.querySelector('.rhd')).backgroundColor !== old", arg=light[0]
    )
    dark = colours()
    assert dark[0] != light[0]
    assert dark[1] != light[1]
    page.evaluate("jupyterapp.commands.execute('apputils:change-theme', {theme: 'JupyterLab Light'})")
    page.wait_for_function("document.body.dataset.jpThemeLight === 'true'")
    clean(sight)


def test_a_file_changed_underneath_is_noticed(desk: Any) -> None:
    code = (
        f"import routeheat_widgets as rw, pathlib\npath = pathlib.Path('routes_{os.getpid()}.txt')\n"
        f"path.write_text({SHEET!r}, encoding='utf-8')\ndesk = rw.RouteDesk(path=path)\ndesk"
    )
    sight = desk(code)
    retype(sight, "-550", "-400")
    expect_text(sight, ".rhd-figure", "−500")
    assert wait_for_kernel(sight, "print('-400' in path.read_text(encoding='utf-8'))") == "True"
    sight.ask("path.write_text('# theirs\\n', encoding='utf-8')")
    sight.page.evaluate("document.activeElement.blur()")
    sight.page.focus(".rhd-text")
    expect_text(sight, ".rhd-file", "was changed by someone else")
    sight.page.click(".rhd-file button >> nth=0")
    sight.page.wait_for_function("document.querySelector('.rhd-text').value === '# theirs\\n'")
    assert (
        sight.ask("print('-400' in next(pathlib.Path('.').glob('routes_*.desk.txt')).read_text(encoding='utf-8'))")
        == "True"
    )
    clean(sight)
