"""What is decided on a farm, and what is done with it."""
