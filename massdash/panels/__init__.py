"""The dashboard's widgets, a thin skin over evaluate, charts and render."""

from massdash.panels.dashboard import Dashboard, dashboard

__all__ = ["Dashboard", "dashboard"]
