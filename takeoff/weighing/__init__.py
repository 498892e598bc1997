"""Members become masses: computed from section and material, else taken as the list states them, with bounds. Rank 4."""

from __future__ import annotations
