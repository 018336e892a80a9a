"""Tables, sheets, pages and exports: the only place that knows colour and layout."""
