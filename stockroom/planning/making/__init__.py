"""What is to be made as batches: told as numbers, and back as makes with their cards."""
