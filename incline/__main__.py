"""``python -m incline``."""

from incline.cli import main

if __name__ == "__main__":
    main()
