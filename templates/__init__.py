"""Report templates and starter files, shipped inside the wheel."""
