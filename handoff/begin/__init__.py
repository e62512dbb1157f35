"""A new patient file, by questions or as a skeleton to fill in; nothing that is there is overwritten."""
