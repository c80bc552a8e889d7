"""Write the demo trials: ``python tests/make_demo_trials.py``. Their truth stands in demos.py."""

from pathlib import Path

from demos import DEMOS, demo_files

ROOT = Path(__file__).resolve().parent.parent / "demo_trials"


def main() -> None:
    for name in DEMOS:
        folder = ROOT / name
        folder.mkdir(parents=True, exist_ok=True)
        for file, text in demo_files(name).items():
            (folder / file).write_text(text, encoding="utf-8", newline="\n")


if __name__ == "__main__":
    main()
