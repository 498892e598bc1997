"""A spreadsheet becomes members: sheets (the only reader of workbooks), headings, rows, members, recognition. Rank 3."""

from __future__ import annotations
