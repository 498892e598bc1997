"""takeoff: from a member list to a weight schedule that a competent person can check."""

from __future__ import annotations

__version__ = "0.1.0"
