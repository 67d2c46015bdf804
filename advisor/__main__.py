"""`python -m advisor` is `gudgeon`."""

from advisor.cli import main

main()
