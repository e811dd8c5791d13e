"""The front matter of the package: each list once, as data, printed in package.pdf and package.html alike."""
