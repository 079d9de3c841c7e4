"""From a resolved scenario and a view to a drawing."""
