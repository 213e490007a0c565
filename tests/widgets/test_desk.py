"""The desk without a browser: its text, its messages, its errors, its end."""

from __future__ import annotations

import gc
import sys
import threading
from collections.abc import Callable
from typing import Any

import comm
import ipywidgets
import pytest

import routeheat as rh
import routeheat_widgets as rw
from routeheat_widgets import _core as desk_module

Make = Callable[..., Any]


def edit(desk: Any, text: str, serial: int = 1, client: str = "page") -> None:
    desk._receive(desk, {"kind": "edit", "text": text, "client": client, "serial": serial}, [])


def test_the_desk_holds_the_sheet_and_the_comparison(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text, per="kg")
    assert desk.text == sheet_text
    assert list(desk.sheet.routes) == ["A", "B"]
    assert desk.comparison.text == rh.compare_routes(rh.read_sheet(sheet_text).routes, per="kg").text


def test_faults_are_shown_not_raised_until_the_sheet_is_asked_for(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text)
    desk.text = sheet_text.replace("dH -550", "dH -5x50")
    assert [fault.line for fault in desk.faults] == [20]
    assert desk.last_error is None
    with pytest.raises(rh.SheetFaults) as caught:
        _ = desk.sheet
    assert caught.value.faults == desk.faults
    with pytest.raises(rh.SheetFaults):
        _ = desk.comparison
    desk.text = sheet_text
    assert desk.faults == ()


def test_an_edit_from_the_page_changes_number_and_picture(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text)
    before = desk.payload
    edit(desk, sheet_text.replace("dH -550", "dH -560"), serial=7)
    assert desk.payload["acks"] == {"page": 7}
    assert desk.payload["revision"] == before["revision"] + 1
    assert desk.payload["stamp"] > before["stamp"]
    assert desk.payload["svg"] != before["svg"]
    assert "dH -560" in desk.text


def test_the_same_text_again_is_acknowledged_without_work(
    make_desk: Make, sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    desk = make_desk(text=sheet_text)
    monkeypatch.setattr(desk_module, "view_content", None)
    edit(desk, sheet_text.replace("\n", "\r\n"), serial=3)
    assert desk.payload["acks"] == {"page": 3}
    assert desk.last_error is None


def test_switching_the_view_does_not_read_the_text_again(
    make_desk: Make, sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    desk = make_desk(text=sheet_text)
    monkeypatch.setattr(desk_module, "read_model", None)
    for view in ("steps", "heat", "known", "measure", "scale", "typed", "routes"):
        desk.view = view
        assert desk.payload["view"] == view


def test_choices_from_the_page_and_from_code_are_the_same(make_desk: Make, sheet_text: str) -> None:
    desk, other = make_desk(text=sheet_text), make_desk(text=sheet_text)
    for key, value in (("view", "routes"), ("show", "one axis"), ("per", "kg")):
        desk._receive(desk, {"kind": "option", "key": key, "value": value}, [])
    other.show("routes", show="one axis", per="kg")
    assert desk.payload["svg"] == other.payload["svg"]
    assert desk.code == other.code


@pytest.mark.parametrize("keywords", [{"txt": ""}, {"view": "route"}])
def test_unknown_words_are_refused(keywords: dict[str, str]) -> None:
    with pytest.raises(rh.UnknownName):
        rw.RouteDesk(**keywords)  # type: ignore[arg-type]


def test_a_text_and_a_file_are_refused() -> None:
    with pytest.raises(TypeError, match="not both"):
        rw.RouteDesk(text="", path="x")


def test_an_unknown_choice_is_refused(make_desk: Make) -> None:
    with pytest.raises(rh.UnknownName):
        make_desk(text="").show("routes", basis="kg")


@pytest.mark.parametrize(
    "message", [{"kind": "boom"}, {}, {"kind": "edit"}, {"kind": "option", "key": "x", "value": ""}]
)
def test_a_message_that_makes_no_sense_is_seen(make_desk: Make, message: dict[str, str]) -> None:
    desk = make_desk(text="")
    desk._receive(desk, message, [])
    assert desk.last_error is not None
    assert desk.payload["error"]


def test_an_exception_while_computing_is_seen_and_raised_to_code(
    make_desk: Make, sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    desk = make_desk(text=sheet_text)
    picture = desk.payload["svg"]

    def broken(*_: object, **__: object) -> None:
        raise ZeroDivisionError("<b>deliberate</b>")

    with monkeypatch.context() as patch:
        patch.setattr(desk_module, "view_content", broken)
        edit(desk, sheet_text + "# a\n")
        assert isinstance(desk.last_error, ZeroDivisionError)
        assert desk.payload["error"] == "ZeroDivisionError: <b>deliberate</b>"
        assert desk.payload["svg"] == picture
        with pytest.raises(ZeroDivisionError):
            desk.text = sheet_text + "# b\n"
    desk.text = sheet_text + "# c\n"
    assert desk.payload["error"] == ""


def test_an_observer_that_fails_is_seen(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text)

    def fail(change: Any) -> None:
        if not change["new"]["error"]:
            raise LookupError("the observer's own")

    desk.observe(fail, names="payload")
    edit(desk, sheet_text + "#\n")
    assert isinstance(desk.last_error, LookupError)
    assert "the observer's own" in desk.payload["error"]


def test_overlapping_edits_leave_no_torn_state(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text)
    seen: list[dict[str, Any]] = []
    desk.observe(lambda change: seen.append(change["new"]), names="payload")
    texts = [sheet_text.replace("dH -550", f"dH -{500 + number}") for number in range(200)]
    start = threading.Barrier(8)
    interval = sys.getswitchinterval()
    sys.setswitchinterval(1e-5)

    def type_some(worker: int) -> None:
        start.wait()
        for number in range(worker, 200, 8):
            if number % 3:
                edit(desk, texts[number], serial=number + 1, client=f"page {worker}")
            else:
                desk.text = texts[number]
            if number % 10 == 0:
                desk.view = "steps" if number % 20 else "routes"

    try:
        threads = [threading.Thread(target=type_some, args=(worker,)) for worker in range(8)]
        for thread in threads:
            thread.start()
        for thread in threads:
            thread.join(120)
    finally:
        sys.setswitchinterval(interval)
    assert not any(thread.is_alive() for thread in threads)
    assert desk.last_error is None
    assert [item["stamp"] for item in seen] == sorted({item["stamp"] for item in seen})
    assert [item["revision"] for item in seen] == sorted(item["revision"] for item in seen)
    for item in seen:
        typed = item["text"].split("dH -", 5)
        heat = next(part.split(" ")[0] for part in typed if " ± 30" in part[:12])
        picture = item["svg"] + item["tables"]
        # 80 % yield: per mole of product the route view shows dH / 0.8, the steps view dH itself
        shown = f"−{heat}" if item["view"] == "steps" else f"−{int(heat) / 0.8:.0f}"
        assert (item["view"] == "steps" and "Route B" in picture) or shown in picture
    assert desk.payload["text"] == desk.text
    final = make_desk(text=desk.text)
    final.view = desk.view
    assert desk.payload["svg"] == final.payload["svg"]
    last = sheet_text.replace("dH -550", "dH -999")
    desk.text = last
    assert desk.payload["text"] == last


def test_a_newer_text_drops_the_one_being_computed(
    make_desk: Make, sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    desk = make_desk(text=sheet_text)
    real, computing, go_on = desk_module.read_model, threading.Event(), threading.Event()
    computed: list[str] = []

    def slow(text: str, *rest: Any) -> Any:
        computed.append(text[-2])
        if text.endswith("#1\n"):
            computing.set()
            go_on.wait(30)
        return real(text, *rest)

    monkeypatch.setattr(desk_module, "read_model", slow)
    seen: list[str] = []
    desk.observe(lambda change: seen.append(change["new"]["text"][-2]), names="payload")
    first = threading.Thread(target=edit, args=(desk, sheet_text + "#1\n"))
    first.start()
    assert computing.wait(30)
    others = []
    for number in (2, 3):
        others.append(threading.Thread(target=edit, args=(desk, sheet_text + f"#{number}\n", number)))
        others[-1].start()
        while desk.text[-2] != str(number):
            pass
    go_on.set()
    for thread in (first, *others):
        thread.join(30)
    assert seen == ["3"]
    assert computed == ["1", "3"]


def test_two_desks_do_not_share_anything(make_desk: Make, sheet_text: str) -> None:
    desk, other = make_desk(text=sheet_text), make_desk(text="")
    edit(desk, sheet_text + "#\n")
    assert other.text == ""
    assert other.payload["acks"] == {}


def test_closing_leaves_nothing_behind(sheet_text: str) -> None:
    widgets, comms = set(ipywidgets.Widget.get_manager_state()["state"]), set(comm.get_comm_manager().comms)
    threads = threading.active_count()
    desk = rw.RouteDesk(text=sheet_text)
    desk._receive(desk, {"kind": "figure", "open": True}, [])
    assert desk.payload["figure"]
    assert desk.last_error is None
    desk.observe(lambda _change: None, names="payload")
    desk.close()
    assert set(ipywidgets.Widget.get_manager_state()["state"]) == widgets
    assert set(comm.get_comm_manager().comms) == comms
    assert threading.active_count() == threads
    assert desk._trait_notifiers == {}
    assert desk.text == sheet_text
    assert list(desk.sheet.routes) == ["A", "B"]
    with pytest.raises(rh.RouteheatError, match="closed"):
        desk.text = ""
    desk.close()


def test_a_closed_desk_can_be_collected(sheet_text: str) -> None:
    import weakref

    desk = rw.RouteDesk(text=sheet_text)
    remembered = weakref.ref(desk)
    desk.close()
    del desk
    gc.collect()
    assert remembered() is None


def test_the_figure_follows_in_place(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text)
    desk._receive(desk, {"kind": "figure", "open": True}, [])
    first = desk.payload["figure"]
    edit(desk, sheet_text.replace("dH -550", "dH -560"))
    desk.view = "steps"
    assert desk.payload["figure"] == first
    widget = desk._figure._widget
    assert len(widget.data) == len(desk.figure().data)
    assert [trace.y for trace in widget.data] == [trace.y for trace in desk.figure().data]
    desk._receive(desk, {"kind": "figure", "open": False}, [])
    assert desk.payload["figure"] == ""


def test_a_view_without_a_diagram_has_no_figure(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text, view="typed")
    with pytest.raises(rh.RouteheatError, match="no diagram"):
        desk.figure()


def test_what_is_printed_is_the_same_every_time(make_desk: Make, sheet_text: str) -> None:
    desk, other = make_desk(text=sheet_text), make_desk(text=sheet_text)
    assert repr(desk) == repr(other)
    assert desk._repr_mimebundle_()[0]["text/html"] == other._repr_mimebundle_()[0]["text/html"]


def test_shown_in_a_notebook_it_leaves_a_page_of_its_own(
    make_desk: Make, sheet_text: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    import IPython.display

    shown: list[dict[str, Any]] = []
    monkeypatch.setattr(IPython.display, "publish_display_data", shown.append)
    desk = make_desk(text=sheet_text)
    desk._ipython_display_()
    assert [sorted(item) for item in shown] == [
        ["application/vnd.jupyter.widget-view+json", "text/plain"], ["text/html", "text/plain"]
    ]  # fmt: skip
    shown.clear()
    desk.close()
    desk._ipython_display_()
    assert [sorted(item) for item in shown] == [["text/html", "text/plain"]]


def test_a_long_paste_from_code_is_a_fault(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text)
    desk.text = "x" * 10_000_000
    assert len(desk.faults) == 1
    assert desk.payload["text"] == ""
    assert not desk.payload["editable"]
    assert desk.payload["svg"]


def test_the_script_has_no_imports_and_no_addresses() -> None:
    script, style = desk_module.script(), desk_module.style()
    assert "import " not in script
    assert "http" not in script + style
    assert "url(" not in style


def test_the_width_of_the_pane_is_used(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text, view="steps")
    desk._receive(desk, {"kind": "width", "width": 700}, [])
    assert 'width="700"' in desk.payload["svg"]


def test_messages_are_not_claimed_by_the_thread_that_spoke_last(make_desk: Make, sheet_text: str) -> None:
    desk = make_desk(text=sheet_text)
    desk.comm._reply_subshell_id = None
    desk.view = "steps"
    assert not hasattr(desk.comm, "_reply_subshell_id")
