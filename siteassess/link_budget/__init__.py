"""How strong what arrives is."""
