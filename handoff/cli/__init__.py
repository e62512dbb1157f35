"""The command line: one file a command. Commands import what they use when they run."""

from __future__ import annotations

import typer

from handoff.cli.begin import begin
from handoff.cli.chart import chart
from handoff.cli.check import check
from handoff.cli.collect import collect
from handoff.cli.demo import demo
from handoff.cli.draft import draft
from handoff.cli.due import due
from handoff.cli.note import note
from handoff.cli.plugins import plugins
from handoff.cli.schema import schema
from handoff.cli.show import show
from handoff.cli.since import since
from handoff.cli.templates import templates
from handoff.cli.transfer import transfer
from handoff.cli.verify import verify
from handoff.cli.ward import ward
from handoff.cli.wording import wording
from handoff.cli.working import working

app = typer.Typer(
    name="handoff",
    help="From one patient-state file to a burn nurse's handover and care plan. "
    "Check every document against the patient, the prescription and local policy.",
    no_args_is_help=True,
    pretty_exceptions_enable=False,
    add_completion=True,
)
for command in (
    demo,
    begin,
    chart,
    check,
    draft,
    verify,
    due,
    show,
    since,
    collect,
    note,
    transfer,
    ward,
    wording,
    working,
    plugins,
    schema,
):
    app.command()(command)
app.add_typer(templates)


def main() -> None:
    """Run the command line."""
    from handoff.cli.edge import guarded

    guarded(app)
