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


def test_a_tilde_is_the_users_own_folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("HOME", "/home/anna")
    file = tmp_path / "config.yaml"
    file.write_text("knowledge: ~/kn\nshelf: not~ours.yaml\n", encoding="utf-8")
    assert settings(file) == Settings(Path("/home/anna/kn"), tmp_path / "not~ours.yaml")


def test_a_tilde_of_a_user_that_is_not_is_told(tmp_path: Path) -> None:
    file = tmp_path / "config.yaml"
    file.write_text("shelf: ~nobody-of-this-name/products.yaml\n", encoding="utf-8")
    with pytest.raises(Refusal, match=r"config\.yaml:1:8.*no user.*in full"):
        settings(file)


def test_a_misspelt_setting_is_told_with_its_line_and_the_mend(tmp_path: Path) -> None:
    file = tmp_path / "config.yaml"
    file.write_text("shelf: a.yaml\nknowlege: ours\n", encoding="utf-8")
    with pytest.raises(Refusal, match=r"config\.yaml:2:1.*'knowlege' is no setting.*knowledge"):
        settings(file)
