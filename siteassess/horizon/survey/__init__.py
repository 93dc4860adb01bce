"""What a crew measured: survey files, bearings, and readings carried to the antenna."""
