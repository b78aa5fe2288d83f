"""Files: text on disk to typed values, errors with line numbers."""
