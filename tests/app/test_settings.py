"""What the program remembers of its user."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QByteArray

from app.settings import Settings, data_folder, settings_file


def again(settings: Settings) -> Settings:
    settings.write()
    return Settings()


def test_nothing_is_remembered_at_first() -> None:
    settings = Settings()
    assert settings.recent_files == ()
    assert settings.last_file is None
    assert settings.theme == "system"
    assert settings.cautions_understood == ""
    assert settings.window() is None


def test_everything_survives_a_restart() -> None:
    settings = Settings()
    settings.remember_file(Path("/a/b c, d.json"))
    settings.last_file = Path("/a/b c, d.json")
    settings.theme = "dark"
    settings.cautions_understood = "0.1.0"
    settings.remember_window(QByteArray(b"\x00\x01geometry"), QByteArray(b"state"))
    settings = again(settings)
    assert settings.recent_files == (Path("/a/b c, d.json"),)
    assert settings.last_file == Path("/a/b c, d.json")
    assert settings.theme == "dark"
    assert settings.cautions_understood == "0.1.0"
    assert settings.window() == (QByteArray(b"\x00\x01geometry"), QByteArray(b"state"))


def test_the_ten_newest_files_are_kept_each_once() -> None:
    settings = Settings()
    for number in [*range(12), 5]:
        settings.remember_file(Path(f"/files/{number}.json"))
    kept = [int(path.stem) for path in again(settings).recent_files]
    assert kept == [5, 11, 10, 9, 8, 7, 6, 4, 3, 2]
    settings.clear_recent_files()
    assert again(settings).recent_files == ()


def test_a_spoilt_settings_file_counts_as_empty() -> None:
    settings_file().parent.mkdir(parents=True)
    settings_file().write_bytes(
        b"\xff\xfe[General]\ntheme=@Variant(\0\0)\nrecent_files=@Invalid()\n"
    )
    settings = Settings()
    assert settings.theme == "system"
    assert settings.recent_files == ()
    assert settings.window() is None


def test_files_stand_under_the_users_folders(home: Path) -> None:
    assert settings_file() == home / "config" / "switchwright" / "settings.ini"
    assert data_folder() == home / "data" / "switchwright"
