"""`python -m tui` is `wearline`."""

from tui.commands import main

main()
