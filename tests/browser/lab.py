"""A private JupyterLab and a browser that may talk to it alone."""

from __future__ import annotations

import contextlib
import json
import os
import shutil
import socket
import subprocess
import sys
import time
import urllib.request
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any
from urllib.parse import urlsplit

ROOT = Path(__file__).parents[2]
CHROMIUM_FLAGS = [
    "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking",
    "--disable-component-update", "--disable-sync", "--enable-precise-memory-info", "--js-flags=--expose-gc",
]  # fmt: skip
_PRIVATE = (
    "JUPYTER_CONFIG_DIR", "JUPYTER_DATA_DIR", "JUPYTER_RUNTIME_DIR", "JUPYTERLAB_SETTINGS_DIR",
    "JUPYTERLAB_WORKSPACES_DIR", "IPYTHONDIR",
)  # fmt: skip


@dataclass
class Lab:
    """A running server with its folder of notebooks."""

    url: str
    folder: Path

    def write(self, name: str, *cells: str) -> str:
        """A notebook with code cells; returns its name."""
        content = {
            "cells": [
                {
                    "cell_type": "code",
                    "execution_count": None,
                    "id": f"cell{number}",
                    "metadata": {},
                    "outputs": [],
                    "source": source,
                }
                for number, source in enumerate(cells)
            ],
            "metadata": {"kernelspec": {"display_name": "Python 3", "language": "python", "name": "python3"}},
            "nbformat": 4,
            "nbformat_minor": 5,
        }
        (self.folder / name).write_text(json.dumps(content), encoding="utf-8")
        return name


@contextlib.contextmanager
def start_lab(folder: Path) -> Iterator[Lab]:
    """A JupyterLab on a free port of 127.0.0.1 with private settings; ended when the block is left."""
    notebooks = folder / "notebooks"
    notebooks.mkdir(parents=True)
    environment = {**os.environ, "PYTHONPATH": os.pathsep.join([str(ROOT / "kernel_lib"), str(ROOT / "widgets")])}
    for name in _PRIVATE:
        environment[name] = str(folder / name.lower())
        Path(environment[name]).mkdir()
    quiet = Path(environment["JUPYTERLAB_SETTINGS_DIR"]) / "@jupyterlab/apputils-extension"
    quiet.mkdir(parents=True)
    (quiet / "notification.jupyterlab-settings").write_text('{"fetchNews": "false", "checkForUpdates": false}')
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        port = probe.getsockname()[1]
    command = [
        sys.executable, "-m", "jupyter", "lab", "--no-browser", "--allow-root", f"--port={port}",
        "--ServerApp.ip=127.0.0.1", "--ServerApp.port_retries=0", "--IdentityProvider.token=",
        f"--ServerApp.root_dir={notebooks}", "--LabApp.expose_app_in_browser=True",
        "--LabApp.check_for_updates_class=jupyterlab.NeverCheckForUpdate", "--LabApp.news_url=None",
    ]  # fmt: skip
    with (folder / "server.log").open("wb") as log:
        server = subprocess.Popen(command, env=environment, stdout=log, stderr=log)
        try:
            url = f"http://127.0.0.1:{port}"
            _wait_until_up(url, server)
            yield Lab(url, notebooks)
        finally:
            server.terminate()
            try:
                server.wait(15)
            except subprocess.TimeoutExpired:
                server.kill()
                server.wait()


def _wait_until_up(url: str, server: subprocess.Popen[bytes]) -> None:
    end = time.monotonic() + 60
    while time.monotonic() < end:
        if server.poll() is not None:
            raise RuntimeError(f"JupyterLab ended with status {server.returncode}")
        with contextlib.suppress(OSError), urllib.request.urlopen(f"{url}/api", timeout=2):
            return
        time.sleep(0.2)
    raise RuntimeError("JupyterLab did not start within 60 s")


def launch(playwright: Any) -> Any:
    """Debian's chromium where it is installed, else playwright's own."""
    return playwright.chromium.launch(executable_path=shutil.which("chromium"), args=CHROMIUM_FLAGS)


@dataclass
class Sight:
    """A page that remembers what it must not do."""

    page: Any
    lab: Lab
    strangers: list[str] = field(default_factory=list)
    """Requests that tried to leave 127.0.0.1; they are stopped."""
    complaints: list[str] = field(default_factory=list)
    """Errors on the console and exceptions that nobody caught."""

    def watch(self) -> None:
        """Stop and note every request to another host, and note errors."""

        def route(route: Any) -> None:
            if urlsplit(route.request.url).hostname in ("127.0.0.1", "localhost", None, ""):
                route.continue_()
            else:
                self.strangers.append(route.request.url)
                route.abort()

        self.page.route("**/*", route)
        self.page.on(
            "console",
            lambda m: self.complaints.append(f"{m.text} ({m.location.get('url', '')})") if m.type == "error" else None,
        )
        self.page.on("pageerror", lambda problem: self.complaints.append(str(problem)))

    def open(self, name: str) -> None:
        """Open JupyterLab with one notebook and its kernel ready."""
        self.page.goto(f"{self.lab.url}/lab?reset")
        self.page.wait_for_function("window.jupyterapp && window.jupyterapp.restored", timeout=60_000)
        self.page.evaluate("window.jupyterapp.restored")
        self.reopen(name)

    def reopen(self, name: str) -> None:
        """Open a notebook in the running JupyterLab."""
        self.page.evaluate(
            """async (path) => {
                const panel = await jupyterapp.commands.execute('docmanager:open', {path, factory: 'Notebook'});
                window.panel = panel;
                await panel.context.ready; await panel.revealed; await panel.sessionContext.ready;
                await panel.sessionContext.session.kernel.info;
            }""",
            name,
        )

    def run_all(self) -> None:
        """Run every cell and wait until the kernel has answered."""
        self.page.evaluate("jupyterapp.commands.execute('notebook:run-all-cells')")
        self.page.wait_for_function(
            "panel.content.widgets.every(c => c.model.type !== 'code' || c.model.executionCount !== null)",
            timeout=60_000,
        )

    def ask(self, code: str) -> str:
        """What the kernel prints for ``code``, outside every cell."""
        return str(
            self.page.evaluate(
                """async (code) => {
                const future = panel.sessionContext.session.kernel.requestExecute({code, store_history: false});
                let text = '';
                future.onIOPub = (m) => {
                    if (m.header.msg_type === 'stream') text += m.content.text;
                    if (m.header.msg_type === 'error') text += m.content.ename + ': ' + m.content.evalue;
                };
                await future.done;
                return text.trim();
            }""",
                code,
            )
        )
