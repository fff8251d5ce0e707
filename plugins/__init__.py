"""The dispersions that ship with eoscore, one small file each."""
