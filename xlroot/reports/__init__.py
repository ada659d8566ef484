"""Reports: a record as something to read, one form a file.

    contents   what a record says, in words and figures, in the order in which it is read
    figures    how many digits a figure may show
    curve      what there is to draw
    terminal   text, for the shell
    machine    JSON, for programs
    sheet      pages of a workbook, for the file and the signature

A new form draws on the first three and is one more file; nothing else changes.
"""
