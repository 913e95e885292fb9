"""What each environment should show: shift window, couplings, splittings."""
