"""`python -m eoscore` is the command `eoscore`."""

from eoscore.cli import main

if __name__ == "__main__":
    main()
