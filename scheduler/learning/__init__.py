"""Learn strain cards from lots that were picked: read the pickings, update what was believed, propose new values."""
