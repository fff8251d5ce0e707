"""`eoscore plugins`: the dispersions that are installed."""

from __future__ import annotations

import sys

import click

from eoscore.cli.exits import ANSWERED

__all__ = ["plugins"]


@click.command()
def plugins() -> int:
    """List the installed dispersions with their parameters, units and origin."""
    from eoscore.show.plugin_table import print_plugins

    print_plugins(sys.stdout)
    return ANSWERED
