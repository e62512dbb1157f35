"""Long runs of tests: the same tests as every day, over many more made-up patients."""
