"""The demo fleet: an invented drainage board, built through the same operations as any entry."""
