"""The front ends of an interview: the sheet in a terminal, and question by question, line by line."""
