# Completion of the command line, where the shells look for it.

bashcompletiondir = $(datadir)/bash-completion/completions
dist_bashcompletion_DATA = %D%/bash/gaswright

zshcompletiondir = $(datadir)/zsh/site-functions
dist_zshcompletion_DATA = %D%/zsh/_gaswright
