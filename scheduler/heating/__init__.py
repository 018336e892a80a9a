"""Questions to the steriliser: one cycle, changes side by side, a logged run, a run with a power cut."""
