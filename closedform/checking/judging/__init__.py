"""Claims judged, alone and as consequences of earlier lines."""
