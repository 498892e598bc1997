"""What people and programs see: one module a format. Computes nothing but layout. Rank 9.

`rounding` decides how a figure is printed, `terminal` is for the person at the keyboard, `records` for programs (JSON,
CSV), `workbook` for whoever gets the schedule, `files` puts outputs on disk whole or not at all.
"""
