"""`python -m convergence` is the command `meshassay`."""

from convergence.cli.main import main

main()
