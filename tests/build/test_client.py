"""The page's side of the worker keeps its promises; the tests themselves are in client.test.mjs."""

import re
import subprocess
from pathlib import Path


def test_client_of_the_worker() -> None:
    script = Path(__file__).with_name("client.test.mjs")
    done = subprocess.run(["node", "--test", str(script)], capture_output=True, text=True)
    assert done.returncode == 0, done.stdout
    passed = re.search(r"pass (\d+)", done.stdout)
    assert passed and int(passed[1]) > 0
