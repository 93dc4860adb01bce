"""The command line: parse, call the library, print, exit code. No science lives here."""

import errno
import io
import shlex
import signal
import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path
from types import FrameType
from typing import TYPE_CHECKING, Any

import click

from siteassess.errors import SiteAssessError

if TYPE_CHECKING:
    from siteassess.report.sheet.form import Paper
    from siteassess.site_file.model import Site

__all__ = ["main"]

EXIT_STATUS = """\b
Exit status:
  0  done, whatever the verdict
  1  cannot assess: each mistake is named on standard error
  2  wrong command line
  3  with --require-pass, the verdict is not "pass"
"""

RANK_EXIT_STATUS = """\b
Exit status:
  0  done, whatever the verdicts
  1  a site cannot be assessed: each mistake is named on standard error, the
     other sites are ranked
  2  wrong command line
  3  with --require-pass, no site passes
"""


class Commands(click.Group):
    """Prints the mistakes of an input, one a line, instead of a traceback."""

    def invoke(self, ctx: click.Context) -> Any:
        if isinstance(sys.stdout, io.TextIOWrapper):
            # Names may hold signs that the terminal's encoding lacks.
            sys.stdout.reconfigure(errors="replace")
        try:
            with _interruptible():
                return super().invoke(ctx)
        except SiteAssessError as error:
            messages = [str(mistake) for mistake in error.mistakes]
        except OSError as error:
            if error.errno == errno.EPIPE:  # whoever reads the output has enough; click ends quietly
                raise
            messages = [f"the output cannot be written; {(error.strerror or str(error)).lower()}"]
        for message in messages:
            _tell(f"Error: {message}")
        raise click.exceptions.Exit(1)


@click.group(cls=Commands, epilog=EXIT_STATUS, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(package_name="siteassess", message="siteassess %(version)s")
def main() -> None:
    """Assess an installation site for a fixed GNSS reference-station antenna.

    A surveyed horizon and the antenna's gain pattern go in; the received power and C/N0 of every satellite,
    the blocked share of the sky and a verdict come out, with a report to hand over.

    \b
    Example:
      siteassess new my_roof
      siteassess assess my_roof
    """


@main.command()
@click.argument("folder", type=click.Path(path_type=Path))
def new(folder: Path) -> None:
    """Write a commented starter site into FOLDER, which must be new or empty.

    \b
    Example:
      siteassess new my_roof
    """
    from siteassess.site_file.starter import write_starter

    write_starter(folder)
    _tell(f"Starter site written to {folder}. Edit site.toml and horizon.csv there, then:")
    # Ready to be copied, whatever signs the name holds.
    end_of_options = ["--"] if str(folder).startswith("-") else []
    _tell(shlex.join(["siteassess", "assess", *end_of_options, str(folder)]), indent="  ")


@main.command(epilog=EXIT_STATUS)
@click.argument("site", type=click.Path(path_type=Path))
@click.option(
    "--out", type=click.Path(path_type=Path), metavar="FOLDER",
    help="Write the report here instead of SITE-report beside the site file.",
)  # fmt: skip
@click.option(
    "--json", "as_json", is_flag=True, help="Print the assessment as JSON; write files only with --out."
)
@click.option(
    "--explain", is_flag=True, help="Find causes, cures and how sure it is for --json too, as for a report."
)
@click.option("--quiet", is_flag=True, help="No summary, notes or progress.")
@click.option("--require-pass", is_flag=True, help="Exit with 3 unless the verdict is pass.")
@click.pass_context
def assess(
    ctx: click.Context,
    site: Path,
    out: Path | None,
    as_json: bool,
    explain: bool,
    quiet: bool,
    require_pass: bool,
) -> None:
    """Assess SITE, a site file or a folder that holds site.toml, and write its report.

    The report is report.html, report.pdf, assessment.json, satellites.csv and skyplot.svg.

    \b
    Example:
      siteassess assess roof.toml --out reports/roof
    """
    with _progress(shown=not quiet) as step, _uncollected():
        from siteassess.assessment import assess_file, explained

        step("reading and assessing")
        assessment = assess_file(site)
        folder = out if out is not None or as_json else _beside(assessment.site, "report")
        if explain or folder is not None:
            step("finding causes, cures and how sure it is")
            assessment = explained(assessment)
        if folder is not None:
            import logging

            from siteassess.report.write import write_report

            # Where matplotlib keeps its cache is not the user's concern.
            logging.getLogger("matplotlib").setLevel(logging.ERROR)
            write_report(assessment, folder, step)
    if as_json:
        from siteassess.report.results import json_text

        # As bytes: UTF-8 and plain line ends on every system.
        click.echo(json_text(assessment).encode(), nl=False)
    elif not quiet:
        from siteassess.report.summary import summary_lines

        for line in summary_lines(assessment):
            click.echo(line)
    if folder is not None and not quiet:
        _tell(f"Report written to {folder}")
    if require_pass and assessment.verdict.outcome != "pass":
        ctx.exit(3)


@main.command()
@click.argument("site", type=click.Path(path_type=Path))
@click.option(
    "--out", type=click.Path(path_type=Path), metavar="FOLDER",
    help="Write the files here instead of SITE-horizon beside the site file.",
)  # fmt: skip
@click.option(
    "--json", "as_json", is_flag=True, help="Print the horizon as JSON; write files only with --out."
)
@click.option("--quiet", is_flag=True, help="No table, notes or progress.")
def horizon(site: Path, out: Path | None, as_json: bool, quiet: bool) -> None:
    """Put the horizon of SITE together from all its sources.

    Prints how much is hidden in each direction, which source shows what, and where sources disagree. Writes
    horizon.csv, one survey file that gives the same horizon, and panorama.svg.

    \b
    Example:
      siteassess horizon my_roof
      siteassess horizon roof.toml --out assembled
    """
    from siteassess.horizon.read import read_site_skyline
    from siteassess.horizon.shares import sky_shares

    with _progress(shown=not quiet) as step:
        step("reading the horizon")
        read, skyline = read_site_skyline(site)
        shares = sky_shares(skyline, read.require.elevation_mask_deg)
        folder = out if out is not None or as_json else _beside(read, "horizon")
        if folder is not None:
            import logging

            from siteassess.report.write_horizon import write_horizon

            logging.getLogger("matplotlib").setLevel(logging.ERROR)
            write_horizon(read, skyline, shares, folder, step)
    if as_json:
        from siteassess.report.horizon_table import horizon_json

        click.echo(horizon_json(read, skyline, shares).encode(), nl=False)
    elif not quiet:
        from siteassess.report.horizon_table import horizon_lines

        for line in horizon_lines(read, skyline, shares):
            click.echo(line)
    if folder is not None and not quiet:
        _tell(f"Horizon written to {folder}")


@main.command()
@click.option(
    "--out", type=click.Path(path_type=Path, dir_okay=False), metavar="FILE.pdf", default="survey-sheet.pdf",
    show_default=True, help="Where the form goes.",
)  # fmt: skip
@click.option(
    "--paper", type=click.Choice(["a4", "letter"]), default="a4", show_default=True, help="Size of the paper."
)
def sheet(out: Path, paper: "Paper") -> None:
    """Write a form to survey a horizon with, for a clipboard.

    It asks for what the site file and horizon.csv need, by their keys and columns, and reminds of the rules.

    \b
    Example:
      siteassess sheet
      siteassess sheet --paper letter --out forms/roof.pdf
    """
    if out.suffix.lower() != ".pdf":
        raise click.BadParameter("the form is a PDF: its name must end in .pdf", param_hint="--out")
    from siteassess.report.sheet.form import write_sheet

    write_sheet(out, paper)
    _tell(f"Form written to {out}")


@main.command()
@click.argument("pattern", metavar="PATTERN")
@click.option(
    "--out", type=click.Path(path_type=Path, dir_okay=False), metavar="FILE.svg",
    help="Draw the polar cut into this file.",
)  # fmt: skip
@click.option("--json", "as_json", is_flag=True, help="Print the figures as JSON.")
def antenna(pattern: str, out: Path | None, as_json: bool) -> None:
    """Print the figures of PATTERN, a built-in antenna pattern or a CSV file.

    Directivity, efficiency, beam width, front-to-back ratio, effective area, gain and axial ratio at four
    elevations, one column a carrier.

    \b
    Example:
      siteassess antenna choke-ring
      siteassess antenna my_antenna.csv --out my_antenna.svg
    """
    if out is not None and out.suffix.lower() != ".svg":
        raise click.BadParameter("the drawing is an SVG: its name must end in .svg", param_hint="--out")
    from siteassess.antenna.read import named_pattern
    from siteassess.report.antenna_table import antenna_json, antenna_lines

    gain = named_pattern(pattern)
    if out is not None:
        from siteassess.report.figures.antenna_plot import antenna_svg, write_svg

        write_svg(out, antenna_svg(gain))
    if as_json:
        click.echo(antenna_json(gain).encode(), nl=False)
    else:
        for line in antenna_lines(gain):
            click.echo(line)


@main.command(epilog=RANK_EXIT_STATUS)
@click.argument("sites", metavar="SITE...", nargs=-1, required=True, type=click.Path(path_type=Path))
@click.option(
    "--out", type=click.Path(path_type=Path), metavar="FOLDER",
    help="Write the ranking here instead of ranking-report in the working folder.",
)  # fmt: skip
@click.option(
    "--json", "as_json", is_flag=True, help="Print the ranking as JSON; write files only with --out."
)
@click.option("--jobs", type=click.IntRange(min=1), metavar="N", help="Number of processes; one a core.")
@click.option("--quiet", is_flag=True, help="No summary, notes or progress.")
@click.option("--require-pass", is_flag=True, help="Exit with 3 unless a site passes.")
@click.pass_context
def rank(
    ctx: click.Context,
    sites: tuple[Path, ...],
    out: Path | None,
    as_json: bool,
    jobs: int | None,
    quiet: bool,
    require_pass: bool,
) -> None:
    """Assess every SITE and put them in order, the best first.

    The ranking is ranking.html, ranking.pdf, ranking.json, ranking.csv and ranking.svg. It says who is better
    in everything than whom, and what each other choice costs.

    \b
    Example:
      siteassess rank harbour/quay_office harbour/silo_yard harbour/tree_line
      siteassess rank roofs/*.toml --out reports/roofs
    """
    from siteassess.candidates.places import distinct_sites
    from siteassess.candidates.rank import rank_sites

    folder = out if out is not None or as_json else Path("ranking-report")
    with _progress(shown=not quiet) as step:
        step("reading and assessing")
        ranking = rank_sites(sites, jobs=jobs, progress=step)
        if folder is not None and ranking.sites:
            import logging

            from siteassess.report.ranking.write import write_ranking

            logging.getLogger("matplotlib").setLevel(logging.ERROR)
            write_ranking(ranking, folder, step)
    if ranking.sites and as_json:
        from siteassess.report.ranking.results import ranking_json

        click.echo(ranking_json(ranking).encode(), nl=False)
    elif ranking.sites and not quiet:
        from siteassess.report.ranking.summary import ranking_lines

        for line in ranking_lines(ranking):
            click.echo(line)
    if not quiet:
        for site in distinct_sites(sites):
            if site.repeated:
                _tell(f"{site.given} is named more than once; it counts once")
        if folder is not None and ranking.sites:
            _tell(f"Ranking written to {folder}")
    for refused in ranking.refused:
        for message in refused.messages:
            _tell(f"Error: {message}")
    if ranking.refused:
        ctx.exit(1)
    if require_pass and ranking.sites[0].candidate.outcome != "pass":
        ctx.exit(3)


@main.command()
@click.argument("old", type=click.Path(path_type=Path))
@click.argument("new", type=click.Path(path_type=Path))
@click.option(
    "--out", type=click.Path(path_type=Path), metavar="FOLDER",
    help="Write changes.html, changes.pdf, changes.json and changes.svg here.",
)  # fmt: skip
@click.option("--json", "as_json", is_flag=True, help="Print the changes as JSON.")
@click.option("--quiet", is_flag=True, help="No summary, notes or progress.")
def changes(old: Path, new: Path, out: Path | None, as_json: bool, quiet: bool) -> None:
    """Compare two surveys of one spot, the site files OLD and NEW.

    It tells what rose and what fell round the antenna beyond the errors of the surveys, and what that did to
    every finding. The spots must be the same within 5 m.

    \b
    Example:
      siteassess changes roof_2024 roof_2026
      siteassess changes roof_2024.toml roof_2026.toml --out reports/roof
    """
    from siteassess.candidates.resurvey import resurvey

    with _progress(shown=not quiet) as step:
        step("reading and assessing")
        found = resurvey(old, new)
        if out is not None:
            import logging

            from siteassess.report.resurvey.write import write_resurvey

            logging.getLogger("matplotlib").setLevel(logging.ERROR)
            write_resurvey(found, out, step)
    if as_json:
        from siteassess.report.resurvey.results import resurvey_json

        click.echo(resurvey_json(found).encode(), nl=False)
    elif not quiet:
        from siteassess.report.resurvey.results import resurvey_lines

        for line in resurvey_lines(found):
            click.echo(line)
    if out is not None and not quiet:
        _tell(f"Changes written to {out}")


@contextmanager
def _interruptible() -> Iterator[None]:
    """Ends an interrupted command as such, whatever a library makes of it that was just being loaded."""
    interrupted = False

    def interrupt(number: int, frame: FrameType | None) -> None:
        nonlocal interrupted
        interrupted = True
        signal.default_int_handler(number, frame)

    if signal.getsignal(signal.SIGINT) is not signal.default_int_handler:  # ignored, as in the background
        yield
        return
    signal.signal(signal.SIGINT, interrupt)
    try:
        yield
    except Exception:  # which one depends on the library; it passes unless the user has interrupted
        if interrupted:
            raise KeyboardInterrupt from None
        raise
    finally:
        signal.signal(signal.SIGINT, signal.default_int_handler)


def _tell(text: str, indent: str = "") -> None:
    """A line on standard error; names of files cannot steer the terminal."""
    from siteassess.report.phrases import plain

    click.echo(indent + plain(text), err=True)


def _beside(site: "Site", what: str) -> Path:
    return site.path.parent / f"{site.path.stem}-{what}"


@contextmanager
def _uncollected() -> Iterator[None]:
    """No search for reference cycles meanwhile: one site leaves few, and the search is a tenth of a run."""
    import gc

    gc.disable()
    try:
        yield
    finally:
        gc.enable()


@contextmanager
def _progress(*, shown: bool) -> Iterator[Callable[[str], None]]:
    """One line on a terminal's standard error that names the step at work; nothing elsewhere."""
    if not (shown and sys.stderr.isatty()):
        yield lambda step: None
        return
    try:
        yield lambda step: click.echo(f"\r\x1b[K{step} ...", nl=False, err=True)
    finally:
        click.echo("\r\x1b[K", nl=False, err=True)
