"""The cheapest explanation of a reported list by the expectations."""
