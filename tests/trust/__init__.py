"""What is promised of the whole program: nothing leaves, nothing stays behind, the same in gives the same out."""
