"""Weighed members become picks: what each weighs and what hangs on the hook. Rank 6."""

from __future__ import annotations
