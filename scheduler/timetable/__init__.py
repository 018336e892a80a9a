"""The coming weeks to the minute."""
