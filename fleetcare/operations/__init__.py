"""Verbs that read and write the database: the only room that holds a session."""
