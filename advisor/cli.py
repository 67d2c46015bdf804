"""The command line: parses, calls one room, prints. Heavy rooms are imported inside their commands."""

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

import click

from advisor import __version__
from advisor.mishaps import DONE, Unheard, guarded

knowledge_option = click.option(
    "--knowledge",
    "knowledge",
    type=click.Path(path_type=Path),
    help="Folder of the knowledge; without it the one that is shipped.",
)
shelf_option = click.option(
    "--shelf",
    type=click.Path(path_type=Path),
    help="File of the products that the site can use; without it the shelf of the knowledge.",
)


@contextmanager
def _heard() -> Iterator[None]:
    """Tell a broken pipe apart: click would end with 1, which here says that something differs."""
    try:
        yield
    except BrokenPipeError:
        raise Unheard from None


class _Commands(click.Group):
    """The commands; neither their output nor their help takes a broken pipe for an outcome."""

    def make_context(self, *arguments: Any, **extra: Any) -> click.Context:
        """As click does it, helps included."""
        with _heard():
            return super().make_context(*arguments, **extra)

    def invoke(self, ctx: click.Context) -> Any:
        """As click does it."""
        with _heard():
            return super().invoke(ctx)


@click.group(
    cls=_Commands, invoke_without_command=True, context_settings={"help_option_names": ["-h", "--help"]}
)
@click.version_option(__version__, prog_name="gudgeon")
@click.pass_context
def gudgeon(context: click.Context) -> None:
    """Choose a lubricant for a lubrication point, with the reasoning behind it.

    Without a command: on a terminal the interview, otherwise the advice for the bundled demonstration case.
    """
    if context.invoked_subcommand is None:
        from advisor import commands

        context.exit(commands.start())


@gudgeon.command()
@click.argument("file", type=click.Path(path_type=Path), required=False)
@click.option(
    "--plain", is_flag=True, help="Question by question, line by line: for screen readers and plain terminals."
)
@click.option("--ascii", "plain_glyphs", is_flag=True, help="Only ASCII signs on the sheet.")
@knowledge_option
@shelf_option
def interview(**options: Any) -> None:
    """Start an interview, or go on with the one kept in FILE."""
    _run("interview", options)


@gudgeon.command()
@click.argument("file", type=click.Path(path_type=Path))
@click.option("--assume", is_flag=True, help="Treat every question without an answer as a don't know.")
@click.option("--full", is_flag=True, help="With why, why not, every computation, and the rules that did not fire.")
@click.option("--json", "as_json", is_flag=True, help="The whole advice as JSON.")
@click.option("--markdown", is_flag=True, help="The explanation as Markdown.")
@click.option("--html", type=click.Path(path_type=Path), help="Write a report as an HTML file.")
@knowledge_option
@shelf_option
def advise(**options: Any) -> None:
    """Advice for a saved case."""
    _run("advise", options)


@gudgeon.command()
@click.argument("folder", type=click.Path(path_type=Path), required=False)
@click.option("--all", "everything", is_flag=True, help="Also accepted conflicts, and whole witnesses.")
@shelf_option
def check(**options: Any) -> None:
    """Everything that is wrong with a knowledge folder, at once."""
    _run("check", options)


@gudgeon.command()
@click.argument("files", type=click.Path(path_type=Path), nargs=-1)
@click.option("--json", "as_json", is_flag=True, help="The outcome as JSON.")
@click.option("--markdown", is_flag=True, help="The outcome as Markdown, for a merge request.")
@click.option("--junit", type=click.Path(path_type=Path), help="Write the outcome as JUnit XML.")
@click.option("--coverage", is_flag=True, help="Also list rules that no scenario fires.")
@knowledge_option
@shelf_option
def replay(**options: Any) -> None:
    """Replay scenarios and compare with what is expected of them; or advice saved as JSON, with what it said."""
    _run("replay", options)


@gudgeon.command()
@click.argument("group", required=False)
@click.option("--by", help="Name of the person who signs.")
@click.option("--because", help="Why the change is right.")
@click.option("--scenarios", type=click.Path(path_type=Path), help="Folder of the scenarios.")
@click.option("--knowledge", type=click.Path(path_type=Path), help="Folder of the knowledge.")
def approve(**options: Any) -> None:
    """Sign for one GROUP of changed expectations; without GROUP list what is to be signed.

    GROUP 'begin' starts the log, APPROVALS.log in the folder of the scenarios; keep it under version control there.
    """
    _run("approve", options)


@gudgeon.command()
@click.argument("files", type=click.Path(path_type=Path), nargs=-1)
@click.option("--rule", "rules", multiple=True, help="Only the mutants of this rule; may be given several times.")
@click.option("--tries", type=click.IntRange(min=0), help="How many cases are tried for each survivor.")
@click.option("--json", "as_json", is_flag=True, help="The result as JSON.")
@knowledge_option
@shelf_option
def mutate(**options: Any) -> None:
    """Change every agreed rule in one place after the other, and list what no scenario in FILES notices."""
    _run("mutate", options)


@gudgeon.command()
@click.argument("old")
@click.argument("new")
@click.option(
    "--scenarios", type=click.Path(path_type=Path), help="Folder of the scenarios; without it the shipped ones."
)
@click.option("--kind", default="rolling_bearing", help="The kind of point to compare; rolling_bearing if not said.")
@click.option("--json", "as_json", is_flag=True, help="The comparison as JSON.")
@click.option("--markdown", is_flag=True, help="The comparison as Markdown, for a merge request.")
def compare(**options: Any) -> None:
    """What changes between two editions of the knowledge: OLD and NEW are folders or git revisions."""
    _run("compare", options)


@gudgeon.command()
@click.argument("words", nargs=-1)
@click.option("--json", "as_json", is_flag=True, help="The list as JSON.")
@knowledge_option
def facts(**options: Any) -> None:
    """List the facts; WORDS filter."""
    _run("facts", options)


@gudgeon.command()
@click.argument("words", nargs=-1)
@click.option("--show", metavar="ID", help="Show one rule in words, with its scenarios and what changes without it.")
@click.option("--json", "as_json", is_flag=True, help="The list as JSON.")
@knowledge_option
def rules(**options: Any) -> None:
    """List the rules, WORDS filter; or show one as its reader meets it."""
    _run("rules", options)


@gudgeon.command()
@click.argument("file", required=False)
@click.option("--out", type=click.Path(path_type=Path), help="Write the schemas of all files into this folder.")
def schema(**options: Any) -> None:
    """The JSON Schema of a knowledge FILE, for editors; without FILE a list of them."""
    _run("schema", options)


@gudgeon.command()
@click.argument("name", required=False)
@click.argument("inputs", nargs=-1, metavar="[INPUT=VALUE]...")
@click.option("--json", "as_json", is_flag=True, help="The result as JSON.")
def compute(**options: Any) -> None:
    """List the formulas, or work one out.

    For instance: gudgeon compute reference_viscosity speed_rpm='1450 rpm' mean_diameter_mm='80 mm'
    """
    _run("compute", options)


def _run(command: str, options: dict[str, Any]) -> None:
    from advisor import commands

    work: Callable[..., int] = getattr(commands, command)
    click.get_current_context().exit(work(**options))


def main() -> None:
    """The entry point: usage and files at fault end with 2, our own faults with 3 and a log, interruptions with 130."""
    guarded(_outcome)


def _outcome() -> int:
    """The exit code that the words of the command line come to; of click's own faults only wrong usage is told here."""
    try:
        return int(gudgeon.main(standalone_mode=False) or DONE)
    except click.ClickException as fault:
        fault.show()
        return fault.exit_code
    except click.Abort as fault:
        raise fault.__cause__ or KeyboardInterrupt from None


if __name__ == "__main__":
    main()
