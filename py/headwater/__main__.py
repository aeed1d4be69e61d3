"""The command line: check a case, list the fields, make and open links."""

import argparse
import json
import os
import sys
import textwrap
from collections.abc import Sequence
from typing import Any

from headwater import __version__

_WIDTH = 78


def main(argv: Sequence[str] | None = None) -> int:
    """Run a command; 0 for an answer, 2 for bad input."""
    parser = argparse.ArgumentParser(prog="headwater", description="Whether a jet boat's pump holds water.")
    parser.add_argument("--version", action="version", version=__version__)
    commands = parser.add_subparsers(dest="command", required=True)
    check = commands.add_parser("check", help="answer a case")
    check.add_argument("case", help="a JSON file, or - for standard input")
    check.add_argument("--json", action="store_true", help="the whole answer, for programs")
    check.add_argument("--units", choices=("us", "metric"), help="units of the sentences; else as typed")
    fields = commands.add_parser("fields", help="list every reading")
    fields.add_argument("--markdown", action="store_true", help="as a Markdown table")
    link = commands.add_parser("link", help="make a case's link fragment, or open one")
    link.add_argument("case", nargs="?", help="a JSON file, or - for standard input")
    link.add_argument("--open", metavar="FRAGMENT", help="print the case that a link carries")
    options = parser.parse_args(argv)
    try:
        return {"check": _check, "fields": _fields, "link": _link}[options.command](options)
    except BrokenPipeError:  # the reader, head for one, has seen enough
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 0


def _load(path: str) -> Any:
    if path == "-":
        return json.load(sys.stdin)
    with open(path, encoding="utf-8") as file:
        return json.load(file)


def _read_case(path: str) -> tuple[Any, bool]:
    """The case in a file, and whether it could be read; if not, says why."""
    try:
        return _load(path), True
    except (OSError, UnicodeDecodeError, RecursionError) as error:
        print(f"{path}: cannot be read: {error}", file=sys.stderr)
    except json.JSONDecodeError as error:
        print(f"{path}: line {error.lineno}, column {error.colno}: not JSON: {error.msg}", file=sys.stderr)
    return None, False


def _check(options: argparse.Namespace) -> int:
    from headwater.answer import shown

    case, found = _read_case(options.case)
    if not found:
        return 2
    result = shown(case, options.units)
    answer = result["answer"]
    if options.json:
        print(json.dumps(answer, indent=1, allow_nan=False, ensure_ascii=False))
    else:
        print("\n".join(_words(result["sheet"])))
    return 2 if answer["errors"] else 0


def _words(sheet: dict[str, Any]) -> list[str]:
    """The sheet as plain text."""
    out = [sheet["headline"]]
    if sheet["errors"]:
        return out + [f"  {row['field']}: {row['text']}" for row in sheet["errors"]]
    out += ["", *_wrap(sheet["lead"]), ""]
    for row in sheet["lines"]:
        span = f"({row['span']})" if row["span"] else ""
        out.append(f"  {row['label']:<24}{row['value']:>12}  {span:<18} {row['aside']}".rstrip())
    out += ["", *_wrap(sheet["ground"])]
    for row in sheet["reasons"]:
        out += _wrap(row["text"])
    if sheet["teach"]:
        out += _wrap(sheet["teach"])
    for title, rows in (
        ("Cautions", [row["text"] for row in sheet["cautions"]]),
        ("Your notes here", [row["text"] for row in sheet["equivalents"]]),
        ("What would change this", [row["text"] for row in sheet["movers"]]),
    ):
        if rows:
            out += ["", f"{title}:", *(f"  {row}" for row in rows)]
    out += ["", "Head at the pump:"]
    out += [f"  {row['sign']} {row['value']:>10}  {row['term']}" for row in sheet["ledger"]]
    return [*out, "", sheet["lets_go"], sheet["not_checked"]]


def _wrap(text: str) -> list[str]:
    return textwrap.wrap(text, _WIDTH)


def _fields(options: argparse.Namespace) -> int:
    from headwater.fields import FIELDS, allowed_text, default_text

    if options.markdown:
        print("| reading | what it is | allowed | left out | mark |\n|---|---|---|---|---|")
    for field in FIELDS:
        usual = "needed" if field.required else default_text(field)
        if options.markdown:
            print(f"| `{field.key}` | {field.label}: {field.meaning} | {allowed_text(field)} | {usual} | {field.mark} |")
        else:
            print(f"{field.key}  [{allowed_text(field) or field.kind}]  {usual}")
            print(textwrap.fill(f"{field.meaning} {field.measure}", _WIDTH, initial_indent="    ", subsequent_indent="    "))
    return 0


def _link(options: argparse.Namespace) -> int:
    from headwater.errors import BadReading
    from headwater.share import decode, encode

    if (options.case is None) == (options.open is None):
        print("headwater link: give a case, or --open and a fragment", file=sys.stderr)
        return 2
    try:
        if options.open is not None:
            print(json.dumps(decode(options.open), indent=1, ensure_ascii=False))
            return 0
        case, found = _read_case(options.case)
        if not found:
            return 2
        print(encode(case))
        return 0
    except BadReading as bad:
        print(bad.action, file=sys.stderr)
        return 2


if __name__ == "__main__":
    sys.exit(main())
