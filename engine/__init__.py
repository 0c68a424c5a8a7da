"""Laws, checks and ranking: computes and does nothing else (numpy and the standard library)."""
