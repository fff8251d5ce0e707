"""The grammar of Tarn, as package data."""
