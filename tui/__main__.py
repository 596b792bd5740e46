"""`python -m tui` is `wearline`."""

from tui.commands import main

if __name__ == "__main__":
    main()
