"""`python -m convergence` is the command `meshassay`."""

from convergence.cli.main import main

if __name__ == "__main__":
    main()
