"""Day counts as exact fractions and due dates from the anchor. Dates only, no money."""
