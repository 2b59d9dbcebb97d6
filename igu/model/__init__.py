"""What the user describes: panes, gaps, coatings, surroundings, catalogue, case file."""
