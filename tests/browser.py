"""A real browser for the page's tests: headless Chromium spoken to through its own pipe, so that no driver is needed."""

from __future__ import annotations

import base64
import json
import os
import select
import subprocess
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

_PATIENCE_S = 90.0


class Browser:
    """One tab. `errors` gathers whatever the page complains of: uncaught errors, console errors, what its policy blocked."""

    def __init__(self, program: str, profile: Path) -> None:
        to_read, self._write = os.pipe()
        self._read, to_write = os.pipe()
        # The browser reads commands from descriptor 3 and answers on 4; a shell puts the pipes there.
        command = [
            program,
            "--headless=new",
            "--remote-debugging-pipe",
            f"--user-data-dir={profile}",
            "--no-sandbox",
            "--disable-gpu",
            "--disable-dev-shm-usage",
            "--no-first-run",
            "--disable-extensions",
            "--disable-background-networking",
            "about:blank",
        ]
        shell = f'exec "$@" 3<&{to_read} 4>&{to_write}'
        self._process = subprocess.Popen(
            ["bash", "-c", shell, "browser", *command], pass_fds=(to_read, to_write), stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL
        )
        os.close(to_read)
        os.close(to_write)
        self._number, self._buffer, self._session = 0, b"", None
        self.errors: list[str] = []
        self.requests: list[str] = []
        target = self.call("Target.createTarget", url="about:blank")["targetId"]
        self._session = self.call("Target.attachToTarget", targetId=target, flatten=True)["sessionId"]
        for domain in ("Page", "Runtime", "Log", "Network", "DOM"):
            self.call(f"{domain}.enable")

    def _messages(self, until: float) -> Iterator[dict[str, Any]]:
        while time.monotonic() < until:
            while b"\0" in self._buffer:
                message, self._buffer = self._buffer.split(b"\0", 1)
                yield json.loads(message)
            if select.select([self._read], [], [], 0.05)[0]:
                read = os.read(self._read, 1 << 20)
                if not read:
                    raise RuntimeError("the browser went away")
                self._buffer += read

    def _note(self, message: dict[str, Any]) -> None:
        what, about = message.get("method"), message.get("params", {})
        if what == "Runtime.exceptionThrown":
            self.errors.append(str(about["exceptionDetails"].get("exception", about["exceptionDetails"])))
        elif what == "Runtime.consoleAPICalled" and about["type"] in {"error", "warning", "assert"}:
            self.errors.append(str(about["args"]))
        elif what == "Log.entryAdded" and about["entry"]["level"] in {"error", "warning"}:
            self.errors.append(str(about["entry"].get("text")))
        elif what == "Network.requestWillBeSent":
            self.requests.append(about["request"]["url"])

    def call(self, method: str, **parameters: Any) -> dict[str, Any]:
        """One command and its answer."""
        self._number += 1
        command: dict[str, Any] = {"id": self._number, "method": method, "params": parameters}
        if self._session:
            command["sessionId"] = self._session
        os.write(self._write, json.dumps(command).encode() + b"\0")
        for message in self._messages(time.monotonic() + _PATIENCE_S):
            if message.get("id") == self._number:
                if "error" in message:
                    raise RuntimeError(f"{method}: {message['error']}")
                result: dict[str, Any] = message["result"]
                return result
            self._note(message)
        raise TimeoutError(method)

    def open(self, page: Path, *, width: int = 1400, height: int = 900) -> None:
        """Open a file at this size and wait until it is there."""
        self.call("Emulation.setDeviceMetricsOverride", width=width, height=height, deviceScaleFactor=1, mobile=False)
        self.call("Page.navigate", url=page.as_uri())
        self.wait("document.readyState === 'complete' && location.protocol === 'file:'")

    def size(self, width: int, height: int = 900) -> None:
        self.call("Emulation.setDeviceMetricsOverride", width=width, height=height, deviceScaleFactor=1, mobile=False)

    def dark(self, wanted: bool) -> None:
        self.call("Emulation.setEmulatedMedia", features=[{"name": "prefers-color-scheme", "value": "dark" if wanted else "light"}])

    def run(self, script: str) -> Any:
        """The value of a script's expression in the page."""
        answer = self.call("Runtime.evaluate", expression=script, returnByValue=True, awaitPromise=True)
        if "exceptionDetails" in answer:
            raise RuntimeError(str(answer["exceptionDetails"]))
        return answer["result"].get("value")

    def wait(self, script: str) -> None:
        """Until an expression holds."""
        until = time.monotonic() + _PATIENCE_S
        while not self.run(script):
            if time.monotonic() > until:
                raise TimeoutError(script)
            time.sleep(0.02)

    def key(self, name: str) -> None:
        """Press and release a key, such as Tab or Enter."""
        codes = {"Tab": 9, "Enter": 13, "Escape": 27}
        text = {"text": "\r"} if name == "Enter" else {}
        self.call("Input.dispatchKeyEvent", type="keyDown", key=name, code=name, windowsVirtualKeyCode=codes[name], **text)
        self.call("Input.dispatchKeyEvent", type="keyUp", key=name, code=name, windowsVirtualKeyCode=codes[name])

    def picture(self, path: Path, *, whole: bool = False) -> None:
        """A picture of what is seen, or of the whole page."""
        data = self.call("Page.captureScreenshot", format="png", captureBeyondViewport=whole)["data"]
        path.write_bytes(base64.b64decode(data))

    def print_to(self, path: Path) -> None:
        """The page as it prints."""
        data = self.call("Page.printToPDF", preferCSSPageSize=True, printBackground=True)["data"]
        path.write_bytes(base64.b64decode(data))

    def close(self) -> None:
        # Asked to close by itself, it ends its helpers too.
        try:
            os.write(self._write, json.dumps({"id": 0, "method": "Browser.close"}).encode() + b"\0")
            self._process.wait(20)
        except (OSError, subprocess.TimeoutExpired):
            self._process.kill()
            self._process.wait(20)
        os.close(self._write)
        os.close(self._read)


@contextmanager
def browser(program: str, profile: Path) -> Iterator[Browser]:
    """A browser with a profile of its own, closed at the end."""
    opened = Browser(program, profile)
    try:
        yield opened
    finally:
        opened.close()
