"""A field of one line in which the question mark is a key, not a letter."""

from textual.widgets import Input


class Field(Input):
    """What is typed here is a number or a part of a name; neither holds a question mark."""

    def __init__(self) -> None:
        super().__init__(compact=True)

    def check_consume_key(self, key: str, character: str | None) -> bool:
        """Leave the question mark to the sheet, where it says that nobody knows."""
        return key != "question_mark" and super().check_consume_key(key, character)
