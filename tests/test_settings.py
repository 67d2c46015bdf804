"""The configuration file names the knowledge and the shelf; what it gets wrong is told with its line."""

from pathlib import Path

import pytest

from advisor.mishaps import Refusal
from advisor.settings import Settings, settings


def test_without_a_file_there_are_no_settings(tmp_path: Path) -> None:
    assert settings(tmp_path / "config.yaml") == Settings()


def test_relative_paths_count_from_the_file(tmp_path: Path) -> None:
    file = tmp_path / "config.yaml"
    file.write_text("knowledge: ours\nshelf: /store/products.yaml\n", encoding="utf-8")
    assert settings(file) == Settings(tmp_path / "ours", Path("/store/products.yaml"))


def test_a_misspelt_setting_is_told_with_its_line_and_the_mend(tmp_path: Path) -> None:
    file = tmp_path / "config.yaml"
    file.write_text("shelf: a.yaml\nknowlege: ours\n", encoding="utf-8")
    with pytest.raises(Refusal, match=r"config\.yaml:2:1.*'knowlege' is no setting.*knowledge"):
        settings(file)
