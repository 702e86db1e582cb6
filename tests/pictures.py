"""`python3 -m tests.pictures`: takes the README's pictures of the real window, on the demo."""

from __future__ import annotations

import os
import sys
import tempfile

SHOTS = (("Duty", "light"), ("Candidates", "light"), ("Turn-off", "dark"), ("Report", "light"))
SIZE = (1440, 830)


def main() -> None:
    from app.bootstrap import ROOT, inside_environment

    inside_environment("tests.pictures", tests=True)
    os.environ["QT_QPA_PLATFORM"] = "offscreen"
    with tempfile.TemporaryDirectory() as home:
        os.environ["XDG_CONFIG_HOME"] = os.environ["XDG_DATA_HOME"] = home
        _take(ROOT / "resources" / "pictures")
    sys.stdout.flush()


def _take(folder) -> None:
    from PySide6.QtTest import QTest
    from PySide6.QtWidgets import QApplication

    from app.main_window import MainWindow
    from app.selection_file import demo_selection
    from app.settings import Settings
    from app.start import PAGES
    from app.theme import apply_theme
    from engine.version import VERSION

    application = QApplication(["switchwright"])
    apply_theme(application, "light")
    settings = Settings()
    settings.cautions_understood = VERSION
    window = MainWindow(PAGES, settings)
    window.document.open(demo_selection(), None)
    window.resize(*SIZE)
    window.show()
    folder.mkdir(parents=True, exist_ok=True)
    for title, look in SHOTS:
        apply_theme(application, look)
        window.show_page(title)
        QTest.qWait(900)
        path = folder / f"{title.lower()}-{look}.png"
        window.grab().save(str(path))
        print(path.name)
    window.leave()


if __name__ == "__main__":
    main()
