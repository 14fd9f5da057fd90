"""The workbook of a match: its design equations as live cells of a spreadsheet, with the response they give."""
