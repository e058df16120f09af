"""Files of other programs: bytes in, rows and drafts out, and back."""
