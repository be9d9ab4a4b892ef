"""`python -m mixsim`: the command line."""

from mixsim.cli import main

if __name__ == "__main__":
    main()
