"""Control: the laws that do for a mount what it cannot do itself."""
