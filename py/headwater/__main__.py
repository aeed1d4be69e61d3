"""The command line: check a case, list the fields, make and open links."""

import argparse
import io
import json
import os
import sys
import textwrap
from collections.abc import Sequence
from itertools import zip_longest
from typing import Any

from headwater import __version__

_WIDTH = 78


class _Unusable(Exception):
    """Input that is no case at all; says why."""


def main(argv: Sequence[str] | None = None) -> int:
    """Run a command; 0 for an answer, 2 for bad input."""
    parser = argparse.ArgumentParser(prog="headwater", description="Whether a jet boat's pump holds water.")
    parser.add_argument("--version", action="version", version=__version__)
    commands = parser.add_subparsers(required=True)
    check = commands.add_parser("check", help="answer a case")
    check.add_argument("case", help="a JSON file, or - for standard input")
    check.add_argument("--json", action="store_true", help="the whole answer, for programs")
    check.add_argument("--units", choices=("us", "metric"), help="units of the sentences; else as typed")
    check.set_defaults(run=_check)
    slip = commands.add_parser("slip", help="whether she slips: rpm seen against rpm expected")
    slip.add_argument("case", help="a JSON file, or - for standard input")
    slip.add_argument("--rpm", action="append", required=True, help="seen here; again for a second reading")
    slip.add_argument("--share", action="append", default=[], help="of the power, for each rpm; wide open")
    slip.add_argument("--speed", action="append", default=[], help="boat speed, for each rpm")
    slip.add_argument("--json", action="store_true", help="for programs")
    slip.set_defaults(run=_slip)
    fields = commands.add_parser("fields", help="list every reading")
    fields.add_argument("--markdown", action="store_true", help="as a Markdown table")
    fields.set_defaults(run=_fields)
    link = commands.add_parser("link", help="make a case's link fragment, or open one")
    one = link.add_mutually_exclusive_group(required=True)
    one.add_argument("case", nargs="?", help="a JSON file, or - for standard input")
    one.add_argument("--open", metavar="FRAGMENT", help="print the case that a link carries")
    link.set_defaults(run=_link)
    options = parser.parse_args(argv)
    if isinstance(sys.stdout, io.TextIOWrapper):
        sys.stdout.reconfigure(errors="replace")  # a terminal that lacks a sign still gets the words
    try:
        code: int = options.run(options)
        sys.stdout.flush()
        return code
    except _Unusable as error:
        print(f"headwater: {error}", file=sys.stderr)
        return 2
    except BrokenPipeError:  # the reader, head for one, has seen enough
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 0


def _read_case(path: str) -> Any:
    """The case in a file; a file may also hold it under the single key "case", as the demo does."""
    name = "standard input" if path == "-" else path
    try:
        if path == "-":
            text = sys.stdin.read()
        else:
            with open(path, encoding="utf-8-sig") as file:
                text = file.read()
        found = json.loads(text, object_pairs_hook=_once)
    except OSError as error:
        raise _Unusable(f"{name} cannot be read: {error.strerror}.") from None
    except UnicodeDecodeError:
        raise _Unusable(f"{name} is not UTF-8 text.") from None
    except json.JSONDecodeError as error:
        where = f"line {error.lineno}, column {error.colno}"
        raise _Unusable(f"{name} is not JSON: {error.msg}, {where}.") from None
    except RecursionError:
        raise _Unusable(f"{name} is nested too deeply for a case.") from None
    except ValueError:
        raise _Unusable(f"{name} holds a number that is too long.") from None
    return found["case"] if isinstance(found, dict) and list(found) == ["case"] else found


def _once(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    """A JSON object in which no key comes twice."""
    found = dict(pairs)
    if len(found) < len(pairs):
        keys = [key for key, _ in pairs]
        twice = next(key for key in keys if keys.count(key) > 1)
        raise _Unusable(f"{twice!r} is given twice. Leave one of them out.")
    return found


def _check(options: argparse.Namespace) -> int:
    from headwater.answer import shown

    result = shown(_read_case(options.case), options.units)
    answer = result["answer"]
    if options.json:
        print(json.dumps(answer, indent=1, allow_nan=False, ensure_ascii=False))
    else:
        print("\n".join(_words(result["sheet"])))
    return 2 if answer["errors"] else 0


def _words(sheet: dict[str, Any]) -> list[str]:
    """The sheet as plain text."""
    out = _wrap(sheet["headline"])
    if sheet["errors"]:
        for row in sheet["errors"]:
            out += _wrap(f"{row['field']}: {row['text']}", "  ")
        return out
    out += ["", *_wrap(sheet["lead"]), ""]
    out += [_line(row) for row in sheet["lines"]]
    if sheet["launch"]:
        out += _launch_words(sheet["launch"])
    out += ["", *_wrap(sheet["ground"])]
    for row in sheet["reasons"]:
        out += _wrap(row["text"])
    if sheet["teach"]:
        out += _wrap(sheet["teach"])
    for title, rows in (
        ("Cautions", sheet["cautions"]),
        ("Your notes here", sheet["equivalents"]),
        ("What would change this", sheet["movers"]),
    ):
        if rows:
            out += ["", f"{title}:"]
            for row in rows:
                out += _wrap(row["text"], "  ")
    out += ["", "Head at the pump:"]
    out += [f"  {row['sign']} {row['value']:>10}  {row['term']}" for row in sheet["ledger"]]
    return [*out, "", sheet["lets_go"], sheet["not_checked"]]


def _line(row: dict[str, Any]) -> str:
    span = f"({row['span']})" if row["span"] else ""
    return f"  {row['label']:<24}{row['value']:>12}  {span:<18} {row['aside']}".rstrip()


def _launch_words(launch: dict[str, Any]) -> list[str]:
    """The launch as plain text."""
    out = ["", f"The launch{', ' if launch['way'] else ''}{launch['way']}:"]
    out += [_line(row) for row in launch["lines"]]
    schedule = launch["schedule"]
    out += ["", "  " + "".join(f"{head:>14}" for head in schedule["head"])]
    out += ["  " + "".join(f"{cell:>14}" for cell in row) for row in schedule["rows"]]
    for text in (launch["abort"], launch["heaviest"]):
        out += _wrap(text, "  ")
    if launch["ways"]:
        out += ["", "Both ways:", *(f"  {name:<6}{state:<9}{room}" for name, state, room in launch["ways"])]
    if launch["remedies"]:
        out += ["", "What would help, the cheapest first:"]
        for text in launch["remedies"]:
            out += _wrap(text, "  ")
    return out


def _wrap(text: str, indent: str = "") -> list[str]:
    return textwrap.wrap(text, _WIDTH, initial_indent=indent, subsequent_indent=2 * indent)


def _slip(options: argparse.Namespace) -> int:
    from headwater.answer import slipping

    rows = zip_longest(options.rpm, options.share, options.speed)
    seen = [{"rpm": rpm, "share": share, "boat_speed": speed} for rpm, share, speed in rows]
    found = slipping(_read_case(options.case), seen)
    if options.json:
        print(json.dumps(found, indent=1, allow_nan=False, ensure_ascii=False))
    else:
        lines = [f"{row['field']}: {row['text']}" for row in found["errors"]] or found["text"]
        print("\n".join(line for text in lines for line in _wrap(text)))
    return 2 if found["errors"] else 0


def _fields(options: argparse.Namespace) -> int:
    from headwater.fields import FIELDS, allowed_text, default_text
    from headwater.sources import SOURCES

    if options.markdown:
        print("| reading | what it is | allowed | left out | mark | source |\n|---|---|---|---|---|---|")
    for field in FIELDS:
        usual = "needed" if field.required else default_text(field)
        allowed = allowed_text(field) or field.kind
        if options.markdown:
            what = f"{field.label}: {field.meaning}"
            guessed = field.tolerance or field.span or field.source != "measured"
            ground = f"{field.mark} | {SOURCES[field.source].text}" if guessed else " | "
            print(f"| `{field.key}` | {what} | {allowed} | {usual} | {ground} |")
        else:
            print(f"{field.key}  [{allowed}]  {usual}".rstrip())
            choices = f" Units: {', '.join(field.units)}." if field.units else ""
            print("\n".join(_wrap(f"{field.meaning} {field.measure}{choices}", "  ")))
    return 0


def _link(options: argparse.Namespace) -> int:
    from headwater.errors import BadReading
    from headwater.share import decode, encode

    try:
        if options.open is None:
            print(encode(_read_case(options.case)))
        else:
            print(json.dumps(decode(options.open), indent=1, allow_nan=False, ensure_ascii=False))
    except BadReading as bad:
        raise _Unusable(bad.action) from None
    return 0


if __name__ == "__main__":
    sys.exit(main())
