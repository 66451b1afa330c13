"""Source files, places in them, and the diagnostics that point there. Imports nothing of ours."""

from calcgen.text.diagnostic import Diagnostic, Related, Report, error, warning
from calcgen.text.nearest import nearest
from calcgen.text.source import SourceFile, Span

__all__ = ["Diagnostic", "Related", "Report", "SourceFile", "Span", "error", "nearest", "warning"]
