"""Paper: drawings in millimetres laid out on tiled and packed pages, and written to files. Knows nothing of chairs."""
