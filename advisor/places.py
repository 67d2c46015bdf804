"""Where things are: the shipped knowledge and demonstration case, and the user's own folders."""

from pathlib import Path

_PACKAGE = Path(__file__).resolve().parent


def knowledge_folder() -> Path:
    """The knowledge that is shipped: beside the package in a checkout, inside it when installed."""
    bundled = _PACKAGE / "_bundled" / "knowledge"
    return bundled if bundled.is_dir() else _PACKAGE.parent / "knowledge"


def demonstration_case() -> Path:
    """The bundled demonstration case."""
    bundled = _PACKAGE / "_bundled" / "demonstration.yaml"
    return (
        bundled
        if bundled.is_file()
        else _PACKAGE.parent / "scenarios" / "rolling_bearing" / "hot_wet_roller_table.yaml"
    )


def scenario_folder() -> Path:
    """The scenarios of this checkout, or the current folder's."""
    beside = _PACKAGE.parent / "scenarios"
    return beside if beside.is_dir() and not (_PACKAGE / "_bundled").is_dir() else Path("scenarios")


def kept_interviews() -> Path:
    """Where unfinished interviews are kept."""
    from platformdirs import user_state_path

    return user_state_path("gudgeon", appauthor=False) / "interviews"


def config_file() -> Path:
    """The user's configuration file."""
    from platformdirs import user_config_path

    return user_config_path("gudgeon", appauthor=False) / "config.yaml"
