"""`manage.py bench`: measure against general libraries, side by side in one run."""

import importlib.util
import json
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

from django.core.management.base import BaseCommand, CommandError

FOLDER = Path(__file__).resolve().parents[3] / "tests" / "bench"


class Command(BaseCommand):
    """Run the named benchmarks, or all."""

    help = "Measure against general libraries, side by side in one run."

    def add_arguments(self, parser: Any) -> None:
        """Names and the output form."""
        parser.add_argument("names", nargs="*", metavar="NAME", help="which ones; all by default")
        parser.add_argument("--json", action="store_true", help="print one JSON object")

    def handle(self, *args: Any, **options: Any) -> None:
        """Run and print."""
        known = dict(list_benchmarks())
        chosen = options["names"] or list(known)
        unknown = sorted(set(chosen) - set(known))
        if unknown:
            raise CommandError(
                f"no benchmark named {', '.join(unknown)}; there are: {', '.join(known)}",
                returncode=2,
            )
        rows = []
        for name in chosen:
            self.stderr.write(f"bench: {name}")
            rows.append({"name": name, **known[name]()})
        self.stdout.write(json.dumps({"rows": rows}) if options["json"] else _table(rows))


def list_benchmarks() -> Iterator[tuple[str, Callable[[], dict[str, Any]]]]:
    """Every function `bench_<name>` of tests/bench, by its name."""
    for path in sorted(FOLDER.glob("bench_*.py")):
        spec = importlib.util.spec_from_file_location(path.stem, path)
        assert spec is not None
        assert spec.loader is not None
        module = importlib.util.module_from_spec(spec)
        spec.loader.exec_module(module)
        for attribute, value in vars(module).items():
            if attribute.startswith("bench_"):
                yield attribute.removeprefix("bench_"), value


def _table(rows: list[dict[str, Any]]) -> str:
    lines = ["| name | ours | peer | peer's time | ratio | error | more |", "|" + " --- |" * 7]
    for row in rows:
        more = {
            key: value
            for key, value in row.items()
            if key not in ("name", "ours_s", "peer", "peer_s", "ratio", "error")
        }
        cells = [row["name"], _seconds(row.get("ours_s")), row.get("peer") or "-"]
        cells += [_seconds(row.get("peer_s")), _number(row.get("ratio")), str(row.get("error"))]
        lines.append("| " + " | ".join([*cells, json.dumps(more) if more else ""]) + " |")
    return "\n".join(lines)


def _seconds(value: float | None) -> str:
    return "-" if value is None else f"{value:.4g} s"


def _number(value: float | None) -> str:
    return "-" if value is None else f"{value:.3g}"
