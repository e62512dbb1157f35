"""Add an entry to a patient's file by insertion: every byte that was there stays as it was."""
