"""xlroot finds a cell's value in a calculation sheet so that a reviewer can sign it."""
