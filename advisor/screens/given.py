"""What editors tell the sheet."""

from textual.message import Message


class Given(Message):
    """An answer was given to the question in place."""

    def __init__(self, text: str) -> None:
        self.text = text
        super().__init__()


class DontKnow(Message):
    """Nobody knows the answer to the question in place."""


class Opened(Message):
    """A question was picked to be answered or changed."""

    def __init__(self, name: str) -> None:
        self.name = name
        super().__init__()


class Chosen(Message):
    """One of the things to do at the end was picked."""

    def __init__(self, what: str) -> None:
        self.what = what
        super().__init__()
