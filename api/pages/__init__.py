"""Plain HTML pages; nothing in them comes from another host."""
