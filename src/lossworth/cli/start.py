"""`lossworth start`: a working tender folder to edit."""

from __future__ import annotations

from pathlib import Path

import click

__all__ = ["start"]


@click.command()
@click.argument("folder", type=click.Path(path_type=Path))
def start(folder: Path) -> None:
    """Write a working example tender into FOLDER, every key explained in a comment.

    FOLDER must not exist yet, or be empty. Edit tender.toml, replace the bids, then run `lossworth evaluate FOLDER`.
    """
    from importlib.resources import as_file, files

    from .writing import copy_tree

    if folder.exists() and (not folder.is_dir() or any(folder.iterdir())):
        raise click.UsageError(f"{folder} exists and is not empty; choose another folder.")
    with as_file(files("lossworth.templates") / "start") as example:
        copied = copy_tree(example, folder)
    click.echo(f"Wrote {', '.join(copied)} into {folder}")
    click.echo(f"Next: edit {folder / 'tender.toml'}, then run  lossworth evaluate {folder}")
