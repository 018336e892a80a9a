"""Learn from pickings: what lots have given and how long they took, against what the cards say."""
