"""`python -m tests.demo_shop` writes demo_data anew."""

from pathlib import Path

from tests.demo_shop.write import files

folder = Path(__file__).resolve().parents[2] / "demo_data"
for name, text in files().items():
    (folder / name).write_text(text, encoding="utf-8", newline="")
