roadglint --version
