#!/usr/bin/python3
"""Reads workbooks with a library that has nothing to do with the one that wrote them.

    /usr/bin/python3 .ci/workbooks.py FILE…

prints as JSON, by file and sheet: the formats of numbers, what may be filled in, how
the sheet is frozen and printed, how many formulas there are, and which of them have no
value beside them for programs that do not compute. openpyxl is the package
python3-openpyxl of Debian 12, version 3.0.9.
"""

import json
import sys

import openpyxl


def sheet(formulas, values):
    formats, count, without = set(), 0, []
    for row in formulas.iter_rows():
        for cell in row:
            if cell.value is None:
                continue
            formats.add(cell.number_format)
            if cell.data_type == "f":
                count += 1
                if values[cell.coordinate].value is None:
                    without.append([cell.coordinate, cell.value])
    return {
        "formats": sorted(formats),
        "asks": sorted({v.type for v in formulas.data_validations.dataValidation}),
        "unlocked": sum(1 for row in formulas.iter_rows() for c in row if not c.protection.locked),
        "frozen": formulas.freeze_panes or "",
        "titles": formulas.print_title_rows or "",
        "wide": formulas.page_setup.fitToWidth or 0,
        "high": formulas.page_setup.fitToHeight or 0,
        "fit": bool(formulas.sheet_properties.pageSetUpPr and formulas.sheet_properties.pageSetUpPr.fitToPage),
        "filter": formulas.auto_filter.ref or "",
        "footer": formulas.oddFooter.right.text or "",
        "formulas": count,
        "without": without,
    }


out = {}
for name in sys.argv[1:]:
    formulas, values = openpyxl.load_workbook(name), openpyxl.load_workbook(name, data_only=True)
    p = formulas.properties
    out[name] = {
        "creator": p.creator,
        "created": p.created.isoformat(),
        "sheets": {s.title: sheet(s, values[s.title]) for s in formulas.worksheets},
    }
json.dump(out, sys.stdout, indent=1)
