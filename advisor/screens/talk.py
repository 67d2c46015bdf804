"""Lines out, lines in: all that the plain interview needs of a terminal."""

from typing import TextIO


class Talk:
    """Signs that the terminal cannot show stop nothing."""

    def __init__(self, source: TextIO, sink: TextIO) -> None:
        self.source, self.sink = source, sink

    def say(self, text: str = "") -> None:
        """One line out."""
        self.sink.write(self._shown(text) + "\n")

    def ask(self, prompt: str) -> str | None:
        """One line in; None at the end of the input."""
        self.sink.write(self._shown(prompt))
        self.sink.flush()
        line = self.source.readline()
        return line.strip() if line else None

    def _shown(self, text: str) -> str:
        encoding = getattr(self.sink, "encoding", None) or "utf-8"
        return text.encode(encoding, "replace").decode(encoding)
