"""Runs the notebook given on stdin in this folder; prints {"notebook", "failed"} as JSON on stdout.

`failed` is null or {"cell": index, "text": message}. One line a started cell goes to stderr: `cell INDEX`.
"""

import json
import sys

import nbformat
from nbclient import NotebookClient
from nbclient.exceptions import CellExecutionError, CellTimeoutError, DeadKernelError

notebook = nbformat.reads(sys.stdin.read(), as_version=4)
current = {"cell": 0}


def started(cell, cell_index):
    current["cell"] = cell_index
    print("cell", cell_index, file=sys.stderr, flush=True)


client = NotebookClient(
    notebook,
    kernel_name="tslab",
    timeout=600,
    record_timing=False,
    resources={"metadata": {"path": "."}},
    on_cell_start=started,
)
failed = None
try:
    client.execute()
except CellExecutionError as error:
    # A cell that does not compile leaves its message in stderr only; the caller reads it from the outputs.
    failed = {"cell": current["cell"], "text": str(error.evalue or "")}
except (CellTimeoutError, DeadKernelError) as error:
    failed = {"cell": current["cell"], "text": str(error)}
json.dump({"notebook": json.loads(nbformat.writes(notebook)), "failed": failed}, sys.stdout)
