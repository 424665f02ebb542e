"""Pages of revisions, one file for each thing a person comes to do: draft, read, compare, bring a car file."""
