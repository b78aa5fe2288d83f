"""Records: what happened in every contact, in one file, written off the control turn."""
