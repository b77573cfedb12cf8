"""Exports of many loops as workbooks, written by openpyxl and XlsxWriter, which share no code with the reader, and the
values that went into them.

Run: python3 tests/reference/exports/workbooks.py   (Debian's python3-openpyxl and python3-xlsxwriter)
It writes values.json, wide.xlsx and long.xlsx beside itself. The versions stand in values.json.
"""
import json
import math
import platform
from datetime import datetime, timedelta
from pathlib import Path

import openpyxl
import xlsxwriter

here = Path(__file__).parent
start = datetime(2026, 3, 4, 6, 0, 0)
period = 2
n = 240
loops = {}
for k, tag in enumerate(["31-FC-104", "31-LC-140"]):
    loops[tag] = {
        "SP": [50.0 + 10 * k + (5.0 if i >= 150 else 0.0) for i in range(n)],
        "PV": [round(50 + 10 * k + 2 * math.sin(i / (7 + k)) + 0.3 * math.cos(i * i), 3) for i in range(n)],
        "OP": [round(40 + 3 * math.cos(i / (7 + k)) - 0.01 * i, 2) for i in range(n)],
        "MODE": ["MAN" if i < 20 + 10 * k else "AUTO" for i in range(n)],
    }
    # Three samples that were not stored.
    for i in (60, 61, 100 + k):
        loops[tag]["PV"][i] = None
columns = [f"{tag}.{signal}" for tag in loops for signal in loops[tag]]
cells = [loops[tag][signal] for tag in loops for signal in loops[tag]]
stamps = [start + timedelta(seconds=period * i) for i in range(n)]

book = openpyxl.Workbook()
sheet = book.active
sheet.title = "area 31"
sheet.append(["water recovery, area 31"])
sheet.append(["time", *columns])
for i, stamp in enumerate(stamps):
    sheet.append([stamp, *(column[i] for column in cells)])
for row in sheet.iter_rows(min_row=3, max_col=1):
    row[0].number_format = "yyyy-mm-dd hh:mm:ss"
book.save(here / "wide.xlsx")

book = xlsxwriter.Workbook(str(here / "long.xlsx"))
sheet = book.add_worksheet("values")
clock = book.add_format({"num_format": "dd.mm.yyyy hh:mm:ss"})
for c, name in enumerate(["time", "tag", "value", "quality"]):
    sheet.write_string(0, c, name)
r = 0
for i, stamp in enumerate(stamps):
    for name, column in zip(columns, cells):
        if name.endswith("MODE") and i > 0 and column[i] == column[i - 1]:
            continue  # stored when it changes
        r += 1
        sheet.write_datetime(r, 0, stamp, clock)
        sheet.write_string(r, 1, name)
        if column[i] is None:
            sheet.write_number(r, 2, 0)
            sheet.write_string(r, 3, "Bad")
        else:
            sheet.write(r, 2, column[i])
            sheet.write_string(r, 3, "Good")
book.close()

made = {"script": "workbooks.py", "python": platform.python_version(), "openpyxl": openpyxl.__version__, "xlsxwriter": xlsxwriter.__version__}
values = {"made": made, "start": start.isoformat() + "Z", "period": period, "loops": loops}
(here / "values.json").write_text(json.dumps(values, indent=1) + "\n")
