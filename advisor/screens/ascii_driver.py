"""A driver for terminals without Unicode: what the screen itself draws is put into ASCII on its way out."""

from textual.driver import Driver

from advisor.screens.glyphs import ONE_FOR_ONE


def ascii_driver(base: type[Driver]) -> type[Driver]:
    """The driver of this platform, writing ASCII only; every sign keeps its one cell."""

    class AsciiDriver(base):  # type: ignore[misc, valid-type]  # which driver it is depends on the platform
        """Writes one ASCII sign for each other one."""

        def write(self, data: str) -> None:
            """Write to the terminal."""
            super().write(data.translate(ONE_FOR_ONE).encode("ascii", "replace").decode("ascii"))

    return AsciiDriver
