# Chronodrome, GPL-3.0-or-later.
"""Compares a workbook with the CSV tables beside it, by readers that are not ours.

usage: compare_workbook.py FOLDER
prints one line a table: name, sheets, rows, numbers, texts, differences; then lines `head SHEET: ...`.
"""
import csv
import pathlib
import sys

import openpyxl

folder = pathlib.Path(sys.argv[1])
book = openpyxl.load_workbook(folder / "workbook.xlsx")
csv.field_size_limit(10**8)

print("sheets", " ".join(name.replace(" ", "_") for name in book.sheetnames))
for sheet in book:
    first = [cell.value for cell in sheet[1]]
    print("head", sheet.title.replace(" ", "_"), "|".join(str(value) for value in first))
    print("frozen", sheet.title.replace(" ", "_"), sheet.freeze_panes, sheet.auto_filter.ref)
    for row in sheet.iter_rows():
        for cell in row:
            if cell.data_type == "f" or cell.hyperlink:
                print("FORMULA", sheet.title, cell.coordinate, cell.value)
print("made", book.properties.created, book.properties.title)

for path in sorted(folder.glob("*.csv")):
    parts = [name for name in book.sheetnames if name == path.stem or name.startswith(path.stem + " (")]
    rows = []
    for part in parts:
        rows += list(book[part].iter_rows(min_row=2, values_only=True))
    numbers = texts = differences = 0
    with open(path, newline="", encoding="utf-8") as file:
        table = list(csv.reader(file))
    heads = [str(cell.value) for cell in book[parts[0]][1]] if parts else []
    for name, head in zip(table[0], heads):
        if head.split(" (")[0] != name:
            differences += 1
    if len(rows) != len(table) - 1 or len(heads) != len(table[0]):
        differences += 1
    for wanted, row in zip(table[1:], rows):
        for text, value in zip(wanted, list(row) + [None] * len(wanted)):
            if isinstance(value, (int, float)):
                numbers += 1
                if text == "" or float(text) != value:
                    differences += 1
            else:
                texts += 1
                if text != (value or ""):
                    differences += 1
    print("table", path.name, len(parts), len(rows), numbers, texts, differences)
