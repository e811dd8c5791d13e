"""What is handed over: sheets as HTML and PDF, the register, the inputs and tables pages, results.json."""
