"""From picks, bundles and loose pieces to vehicles: placing, axles, envelope, securing. Rank 7."""
